import { readFileSync } from 'node:fs';
import { setTimeout as delay } from 'node:timers/promises';
import type { Equatorial } from '../src/lib/sky/angle';
import { formatPosition } from './demoFeedLog';
import { drawStory, planStory, type DemoStream, type PlannedPacket } from './demoEvents';
import { demoVoEvent } from './demoVoEvent';
import { between, seededDraw, type Draw } from './demoSky';
import { isMain } from './runAsProcess';

export type FeedOptions = {
	/** Where the application answers. */
	origin: string;
	/** Where the VOEvent broker takes what it is to send. */
	brokerUrl: string;
	/** API key of each stream. */
	keys: Record<DemoStream, string>;
	draw: Draw;
	/** The first burst keeps away from here: something else is happening there. */
	awayFrom?: Equatorial | null;
	log: (line: string) => void;
	/** Aborting it ends the feed. */
	signal: AbortSignal;
	/** Waits; replaced in tests, where minutes must not pass. */
	sleep?: (ms: number, signal: AbortSignal) => Promise<void>;
	now?: () => number;
};

/** The stream whose packets go out as VOEvents, through the broker. */
const VOEVENT_STREAM: DemoStream = 'carapace';

const FIRST_AFTER_MS = 5_000;
const QUIET_MINUTES = { low: 6, high: 10 };
const FIRST_RETRY_MS = 2_000;
const LONGEST_RETRY_MS = 60_000;
const REQUEST_TIMEOUT_MS = 20_000;

/**
 * Posts packets of the invented streams to the public API, and those of one to the VOEvent broker, until aborted: a burst that is narrowed
 * from degrees to arcseconds within 90 s, then another story every 6 to 10 minutes.
 */
export async function runFeed(options: FeedOptions): Promise<void> {
	const sleep = options.sleep ?? abortableDelay;
	const now = options.now ?? Date.now;
	const { draw, signal } = options;
	try {
		await sleep(FIRST_AFTER_MS, signal);
		for (let isFirst = true; ; isFirst = false) {
			const startMs = now();
			const t0Ms = startMs - Math.round(between(draw, 2_000, 6_000));
			const story = isFirst ? 'localised' : drawStory(draw);
			const planned = planStory(draw, story, t0Ms, isFirst ? options.awayFrom : null);
			for (const next of planned) {
				await sleep(Math.max(0, startMs + next.delayS * 1000 - now()), signal);
				await deliver(next, { ...options, sleep });
			}
			const quietMs = between(draw, QUIET_MINUTES.low, QUIET_MINUTES.high) * 60_000;
			await sleep(Math.max(0, startMs + quietMs - now()), signal);
		}
	} catch (error) {
		if (!signal.aborted) throw error;
	}
}

/** Posts one packet; waits longer and longer while the server is away, gives up on a refusal. */
async function deliver(
	{ stream, packet }: PlannedPacket,
	options: FeedOptions & { sleep: NonNullable<FeedOptions['sleep']> }
): Promise<void> {
	const { log, signal, sleep } = options;
	const name = `${packet.packetId} serial ${packet.serial} (${packet.kind}${formatPosition(packet)})`;
	for (let retryMs = FIRST_RETRY_MS; ; retryMs = Math.min(LONGEST_RETRY_MS, retryMs * 2)) {
		const outcome = await post(stream, packet, options);
		if (outcome.final) {
			log(`${name}: ${outcome.text}`);
			return;
		}
		log(`${name}: ${outcome.text}; again in ${retryMs / 1000} s`);
		await sleep(retryMs, signal);
	}
}

async function post(
	stream: DemoStream,
	packet: PlannedPacket['packet'],
	options: FeedOptions
): Promise<{ final: boolean; text: string }> {
	const { signal } = options;
	const viaBroker = stream === VOEVENT_STREAM;
	const { address, ...request } = viaBroker
		? requestToBroker(packet, options)
		: requestToApplication(stream, packet, options);
	try {
		const response = await fetch(address, {
			method: 'POST',
			...request,
			signal: AbortSignal.any([signal, AbortSignal.timeout(REQUEST_TIMEOUT_MS)])
		});
		const body = await response.text();
		if (response.ok) {
			const taken = response.status === 200 ? 'known already' : 'taken';
			return { final: true, text: viaBroker ? 'handed to the broker' : taken };
		}
		const refused = response.status < 500 && response.status !== 429;
		const reason = refused ? `: ${body.slice(0, 300)}` : '';
		return { final: refused, text: `answered ${response.status}${reason}` };
	} catch (error) {
		if (signal.aborted) throw error;
		return {
			final: false,
			text: `the ${viaBroker ? 'broker' : 'application'} does not answer`
		};
	}
}

type Request = { address: string; headers: Record<string, string>; body: string };

function requestToApplication(
	stream: DemoStream,
	packet: PlannedPacket['packet'],
	{ origin, keys }: FeedOptions
): Request {
	return {
		address: `${origin}/api/v1/alerts`,
		headers: { 'Content-Type': 'application/json', Authorization: `Bearer ${keys[stream]}` },
		body: JSON.stringify(packet)
	};
}

function requestToBroker(
	packet: PlannedPacket['packet'],
	{ brokerUrl, now = Date.now }: FeedOptions
): Request {
	return {
		address: `${brokerUrl}/api/events`,
		headers: { 'Content-Type': 'application/xml' },
		body: demoVoEvent(packet, new Date(now()))
	};
}

async function abortableDelay(ms: number, signal: AbortSignal): Promise<void> {
	await delay(ms, undefined, { signal });
}

if (isMain(import.meta.url)) {
	const origin = process.env.ORIGIN;
	const keysFile = process.env.DUSKLINE_DEMO_KEYS_FILE;
	const brokerUrl = process.env.DUSKLINE_BROKER_URL;
	if (!origin || !keysFile || !brokerUrl) {
		throw new Error('ORIGIN, DUSKLINE_BROKER_URL and DUSKLINE_DEMO_KEYS_FILE must be set');
	}
	const { streams, happening } = JSON.parse(readFileSync(keysFile, 'utf8')) as {
		streams: Record<DemoStream, string>;
		happening?: Equatorial | null;
	};
	const stop = new AbortController();
	for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
		process.once(signal, () => stop.abort());
	}
	await runFeed({
		origin,
		brokerUrl,
		keys: streams,
		awayFrom: happening,
		draw: seededDraw(Number(process.env.DUSKLINE_FEED_SEED ?? Date.now())),
		log: (line) => console.log(`${new Date().toISOString().slice(11, 19)} UTC  ${line}`),
		signal: stop.signal
	});
}
