import { setTimeout as delay } from 'node:timers/promises';
import pg from 'pg';
import type { Board } from '../../src/lib/domain/board';
import { startStack } from '../e2e/support/stack';
import { signIn } from './signIn';
import type { BenchRow } from './run';

const WARM_UP = 60;
const ONE_BY_ONE = 300;
const OUTLOOKS = 80;
const SENDERS = 16;
const SUSTAINED_MS = 15_000;
/** Packets that each sender keeps updating: bursts of real streams are mostly updates. */
const PACKETS_PER_SENDER = 4;
/** Transients that the packets sent one by one belong to, so that the board stays of a real size. */
const BURSTS = 12;
const POLL_MS = 5;
const DAY_MS = 86_400_000;

/**
 * The way in, through the built application on a real PostgreSQL on loopback: one circle packet at a time,
 * the time until its outlook is on the board, and what sixteen senders get through.
 */
export default async function ingest(): Promise<BenchRow[]> {
	const stack = await startStack({ durable: true });
	try {
		const { origin, streamKeys, databaseUrl } = stack.addresses;
		const send = sender(origin, streamKeys.tambour);
		const sendOne = (name: string, i: number) =>
			send(`${name}-${i % BURSTS}`, Math.floor(i / BURSTS) + 1, i % BURSTS);
		for (let i = 0; i < WARM_UP; i++) await sendOne('warm', i);
		const alone: number[] = [];
		for (let i = 0; i < ONE_BY_ONE; i++) alone.push((await sendOne('alone', i)).ms);
		await settled(databaseUrl);
		const ready = await outlookTimes(origin, sendOne);
		const sustained = await sustain(send);
		const { lost, doubled } = await account(databaseUrl, sustained.accepted);
		return [
			['ingest_p50_ms', quantile(alone, 0.5), 'ms'],
			['ingest_p99_ms', quantile(alone, 0.99), 'ms'],
			['outlook_ready_p50_ms', quantile(ready, 0.5), 'ms'],
			['outlook_ready_p99_ms', quantile(ready, 0.99), 'ms'],
			['ingest_per_s', sustained.accepted.length / sustained.seconds, 'per_s'],
			['ingest_lost', lost, 'packets'],
			['ingest_doubled', doubled, 'packets']
		];
	} finally {
		await stack.stop();
	}
}

type Sent = { ms: number; designation: string; alertId: string };
type Send = (packetId: string, serial: number, place: number) => Promise<Sent>;

/** Posts circles: each place of its own on the sky and, apart by minutes, in time. */
function sender(origin: string, key: string): Send {
	const nowMs = Date.now();
	return async (packetId, serial, place) => {
		// Within two days: older ones are closed as stale, and have no outlook.
		const t0Ms = nowMs - ((place * 7_919_000) % (2 * DAY_MS)) - 1000;
		const body = JSON.stringify({
			packetId,
			serial,
			role: 'observation',
			kind: serial === 1 ? 'report' : 'update',
			t0: new Date(t0Ms).toISOString(),
			shape: {
				kind: 'circle',
				centre: {
					raDeg: (place * 137.508 + serial / 100) % 360,
					decDeg: ((place * 31.7) % 120) - 60
				},
				radiusDeg: 1 + (place % 5),
				containment: 0.9
			}
		});
		const startMs = performance.now();
		const answer = await fetch(`${origin}/api/v1/alerts`, {
			method: 'POST',
			headers: { authorization: `Bearer ${key}`, 'content-type': 'application/json' },
			body
		});
		const receipt = (await answer.json()) as { designation: string; alertId: string };
		if (answer.status !== 201) throw new Error(`a packet was answered ${answer.status}`);
		return { ms: performance.now() - startMs, ...receipt };
	};
}

/** From the POST until the board shows an outlook of what was posted, ranked. */
async function outlookTimes(
	origin: string,
	sendOne: (name: string, i: number) => Promise<Sent>
): Promise<number[]> {
	const cookie = await signIn(origin);
	const times: number[] = [];
	for (let i = 0; i < OUTLOOKS; i++) {
		const startMs = performance.now();
		const { designation, alertId } = await sendOne('ready', i);
		for (let revision = 0, etag = ''; ; await delay(POLL_MS)) {
			const answer = await fetch(`${origin}/api/v1/board?since=${revision}`, {
				headers: { cookie, ...(etag ? { 'if-none-match': etag } : {}) }
			});
			const text = await answer.text();
			if (answer.status === 304) continue;
			etag = answer.headers.get('etag') ?? '';
			const board = JSON.parse(text) as Board;
			revision = board.revision;
			const shown = board.transients.find((item) => item.designation === designation);
			if (
				shown?.parts.some((part) => part.alertId === alertId) &&
				shown.outlook?.regionVersion === shown.region?.version
			) {
				break;
			}
		}
		times.push(performance.now() - startMs);
	}
	return times;
}

async function sustain(send: Send): Promise<{ accepted: string[]; seconds: number }> {
	const startMs = performance.now();
	const untilMs = startMs + SUSTAINED_MS;
	const accepted: string[] = [];
	await Promise.all(
		Array.from({ length: SENDERS }, async (_, who) => {
			for (let n = 0; performance.now() < untilMs; n++) {
				const packet = n % PACKETS_PER_SENDER;
				const serial = Math.floor(n / PACKETS_PER_SENDER) + 1;
				const packetId = `many-${who}-${packet}`;
				await send(packetId, serial, 10_000 + who * PACKETS_PER_SENDER + packet);
				accepted.push(`${packetId} ${serial}`);
			}
		})
	);
	return { accepted, seconds: (performance.now() - startMs) / 1000 };
}

/** What was accepted and is not there, and what is there more than once. */
async function account(
	databaseUrl: string,
	accepted: string[]
): Promise<{ lost: number; doubled: number }> {
	const { rows } = await queried<{ name: string }>(
		databaseUrl,
		`select packet_id || ' ' || serial as name from alert where packet_id like 'many-%'`
	);
	const stored = new Set(rows.map(({ name }) => name));
	return {
		lost: accepted.filter((name) => !stored.has(name)).length,
		doubled: rows.length - stored.size
	};
}

/** Waits until no outlook is due, so that one measurement does not pay for another. */
async function settled(databaseUrl: string): Promise<void> {
	for (let tries = 0; tries < 600; tries++) {
		const { rows } = await queried<{ count: string }>(
			databaseUrl,
			`select count(*) from pgboss.job where name = 'outlook.refresh' and state < 'completed'`
		);
		if (Number(rows[0]!.count) === 0) return;
		await delay(200);
	}
}

async function queried<Row extends pg.QueryResultRow>(
	databaseUrl: string,
	text: string
): Promise<pg.QueryResult<Row>> {
	const client = new pg.Client({ connectionString: databaseUrl });
	await client.connect();
	try {
		return await client.query<Row>(text);
	} finally {
		await client.end();
	}
}

function quantile(values: number[], share: number): number {
	const sorted = [...values].sort((a, b) => a - b);
	return sorted[Math.floor(share * (sorted.length - 1))] ?? NaN;
}
