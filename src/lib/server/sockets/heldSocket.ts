import type { App } from '../app';
import { logger } from '../logger';
import { takeIn } from '../packets/takeInService';
import type { StreamRow } from '../packets/readOutcome';
import { keepConnected } from './brokerConnection';
import type { BrokerLock } from './brokerLock';
import { noteAlive, noteBroken, noteConnected, type BrokerRow } from './brokerStore';
import type { SocketTimings } from './socketTimings';

/** A broker's socket in this process, from the lock to its release. */
export type HeldSocket = {
	/** The settings it was begun with. */
	broker: BrokerRow;
	verify: () => Promise<void>;
	/** The stream's settings as they are now, for the packets to come. */
	follow: (stream: StreamRow) => void;
	/** Settles when the socket is closed and the lock released. */
	ended: Promise<void>;
	stop: () => void;
};

/** Keeps a broker's socket while the lock lasts and until stopped, and notes in its row how it fares. */
export function holdSocket(
	app: App,
	lock: BrokerLock,
	{ broker, stream }: { broker: BrokerRow; stream: StreamRow },
	timings: SocketTimings
): HeldSocket {
	const stopped = new AbortController();
	const about = { broker: `${broker.host}:${broker.port}`, stream: stream.code };
	let source = stream;
	let aliveNotedMs = -Infinity;
	let notes = Promise.resolve();
	/** One after the other; what can't be noted is the connection's loss, which ends the socket anyway. */
	const note = (write: () => Promise<void>) => {
		notes = notes.then(write).catch((error: unknown) => {
			logger.debug({ ...about, error: (error as Error).message }, 'socket state not noted');
		});
	};

	const run = async () => {
		// What a process that died over it has left.
		note(() => noteBroken(lock.database, broker.id, app.now(), null));
		await keepConnected(
			{
				host: broker.host,
				port: broker.port,
				identity: `ivo://${new URL(app.config.origin).hostname}/duskline`,
				ivornPrefix: broker.ivornPrefix,
				take: (body) =>
					takeIn(app, source, { body, contentType: 'application/voevent+xml', channel: 'socket' }),
				onConnected: () => {
					logger.info(about, 'socket connected');
					note(() => noteConnected(lock.database, broker.id, app.now()));
				},
				onMessage: () => {
					const nowMs = performance.now();
					if (nowMs - aliveNotedMs < timings.noteAliveMs) return;
					aliveNotedMs = nowMs;
					note(() => noteAlive(lock.database, broker.id, app.now()));
				},
				onBroken: (reason) => {
					logger.info({ ...about, reason }, 'socket closed');
					note(() => noteBroken(lock.database, broker.id, app.now(), reason));
				},
				timings,
				now: app.now
			},
			AbortSignal.any([stopped.signal, lock.lost])
		);
	};
	const ended = run()
		.catch((error: unknown) => {
			logger.error({ ...about, error: (error as Error).message }, 'socket failed');
		})
		.then(() => notes)
		.then(() => lock.release());
	return {
		broker,
		verify: lock.verify,
		follow: (next) => void (source = next),
		ended,
		stop: () => stopped.abort()
	};
}
