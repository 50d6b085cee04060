import { setTimeout as delay } from 'node:timers/promises';
import type { Board } from '../../src/lib/domain/board';
import { startStack } from '../e2e/support/stack';
import type { BenchRow } from './run';
import { signIn } from './signIn';

const RUN_MS = 20_000;
/** A process that has just started compiles its code; these answers are not counted. */
const WARM_UP_MS = 5_000;
const POLLERS = 8;
const POLL_MS = 100;
/** Radius of a 90 % circle of 500 square degrees. */
const WIDE_RADIUS_DEG = 12.64;

/**
 * Answer times of the board while outlooks of a 500 deg² region are computed one after another in
 * the same process: eight clients ask ten times a second, each with its own validator. Counted once the
 * process has run for five seconds.
 */
export default async function eventloop(): Promise<BenchRow[]> {
	const stack = await startStack();
	try {
		const { origin, streamKeys } = stack.addresses;
		const cookie = await signIn(origin);
		const countFromMs = performance.now() + WARM_UP_MS;
		const untilMs = countFromMs + RUN_MS;
		const times: number[] = [];
		const feed = postUpdates(origin, streamKeys.tambour, untilMs);
		await Promise.all(
			Array.from({ length: POLLERS }, () => poll(origin, cookie, countFromMs, untilMs, times))
		);
		const outlooks = await feed;
		const sorted = times.sort((a, b) => a - b);
		const at = (share: number) => sorted[Math.floor(share * (sorted.length - 1))] ?? NaN;
		return [
			['board_p50_ms', at(0.5), 'ms'],
			['board_p99_ms', at(0.99), 'ms'],
			['board_answers', sorted.length, 'answers'],
			['wide_regions_sent', outlooks, 'regions']
		];
	} finally {
		await stack.stop();
	}
}

/** Sends a higher serial of one wide circle every second, so that a new outlook is always due. */
async function postUpdates(origin: string, key: string, untilMs: number): Promise<number> {
	let serial = 0;
	while (performance.now() < untilMs) {
		serial++;
		const answer = await fetch(`${origin}/api/v1/alerts`, {
			method: 'POST',
			headers: { authorization: `Bearer ${key}`, 'content-type': 'application/json' },
			body: JSON.stringify({
				packetId: 'TB-bench',
				serial,
				role: 'observation',
				kind: serial === 1 ? 'report' : 'update',
				t0: new Date(Date.now() - 60_000).toISOString(),
				shape: {
					kind: 'circle',
					centre: { raDeg: 80 + serial / 50, decDeg: 5 },
					radiusDeg: WIDE_RADIUS_DEG,
					containment: 0.9
				}
			})
		});
		if (!answer.ok) throw new Error(`a packet was refused: ${await answer.text()}`);
		await delay(1000);
	}
	return serial;
}

async function poll(
	origin: string,
	cookie: string,
	countFromMs: number,
	untilMs: number,
	times: number[]
): Promise<void> {
	let etag = '';
	let revision = 0;
	while (performance.now() < untilMs) {
		const startMs = performance.now();
		const answer = await fetch(`${origin}/api/v1/board?since=${revision}`, {
			headers: { cookie, ...(etag ? { 'if-none-match': etag } : {}) }
		});
		const body = await answer.text();
		if (startMs >= countFromMs) times.push(performance.now() - startMs);
		if (answer.status === 200) {
			etag = answer.headers.get('etag') ?? '';
			revision = (JSON.parse(body) as Board).revision;
		} else if (answer.status !== 304) {
			throw new Error(`the board answered ${answer.status}`);
		}
		await delay(POLL_MS);
	}
}
