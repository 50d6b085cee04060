import type { App } from '../app';
import { logger } from '../logger';
import { takeBrokerLock } from './brokerLock';
import { wantedBrokers, type BrokerRow, type WantedBroker } from './brokerStore';
import { holdSocket, type HeldSocket } from './heldSocket';
import { SOCKET_TIMINGS, type SocketTimings } from './socketTimings';

/**
 * Subscribes this process to the brokers in the database, each held by one process at a time: whoever gets a
 * broker's lock keeps its socket, the others look again every few seconds. Brokers that are added, switched
 * or removed are followed at the same pace.
 *
 * @returns ends it: closes the sockets once what they are taking in is settled, and releases the locks.
 */
export function startBrokerSubscriber(
	app: App,
	timings: SocketTimings = SOCKET_TIMINGS
): () => Promise<void> {
	const sockets = new Map<string, HeldSocket>();
	let stopped = false;
	let failing = false;
	let timer: NodeJS.Timeout | undefined;

	const tryFor = async (wanted: WantedBroker): Promise<void> => {
		const { id } = wanted.broker;
		const lock = await takeBrokerLock(app.config.databaseUrl, id);
		if (!lock) return;
		if (stopped) return lock.release();
		const socket = holdSocket(app, lock, wanted, timings);
		sockets.set(id, socket);
		void socket.ended.then(() => sockets.delete(id));
	};

	const look = async (): Promise<void> => {
		// Does not wait: a connection that hangs is found out while the rest goes on.
		for (const socket of sockets.values()) void socket.verify();
		const wanted = await wantedBrokers(app.database);
		const rows = new Map(wanted.map((row) => [row.broker.id, row]));
		for (const [id, socket] of sockets) {
			const row = rows.get(id);
			if (row && sameAddress(row.broker, socket.broker)) socket.follow(row.stream);
			else socket.stop();
		}
		for (const row of wanted) {
			if (!stopped && !row.held && !sockets.has(row.broker.id)) await tryFor(row);
		}
	};

	let looking: Promise<void>;
	const lookAndWait = () => {
		looking = look()
			.then(() => void (failing = false))
			.catch((error: unknown) => {
				// Once, not every few seconds while the database is away.
				if (!failing) {
					const { message } = ((error as Error).cause ?? error) as Error;
					logger.warn({ error: message }, 'sockets can’t be looked after');
				}
				failing = true;
			})
			.then(() => {
				if (!stopped) timer = setTimeout(lookAndWait, timings.pollMs);
			});
	};
	lookAndWait();

	return async () => {
		stopped = true;
		clearTimeout(timer);
		for (const socket of sockets.values()) socket.stop();
		await looking;
		await Promise.all([...sockets.values()].map(({ ended }) => ended));
	};
}

function sameAddress(one: BrokerRow, other: BrokerRow): boolean {
	return (
		one.host === other.host &&
		one.port === other.port &&
		one.ivornPrefix === other.ivornPrefix &&
		one.streamId === other.streamId
	);
}
