import { and, asc, eq, getTableColumns } from 'drizzle-orm';
import type { SocketCreate, SocketView } from '../../domain/streamSocket';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { databaseErrorOf, type Executor } from '../db/database';
import { stream, streamBroker } from '../db/schema/alerts';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { isHeld } from './brokerLock';

/** The servers that send a stream's VOEvents, and how each connection fares. */
export async function listSockets(
	app: App,
	actor: Actor | null,
	streamCode: string
): Promise<SocketView[]> {
	requirePermission(actor, 'viewNetwork');
	const rows = await app.database
		.select({ broker: getTableColumns(streamBroker), held: isHeld(streamBroker.id) })
		.from(streamBroker)
		.innerJoin(stream, eq(stream.id, streamBroker.streamId))
		.where(eq(stream.code, streamCode))
		.orderBy(asc(streamBroker.host), asc(streamBroker.port));
	return rows.map(({ broker, held }) => ({
		id: broker.id,
		host: broker.host,
		port: broker.port,
		ivornPrefix: broker.ivornPrefix,
		enabled: broker.enabled,
		held,
		connectedAt: broker.connectedAt?.toISOString() ?? null,
		lastAliveAt: broker.lastAliveAt?.toISOString() ?? null,
		lastError: broker.lastError,
		lastErrorAt: broker.lastErrorAt?.toISOString() ?? null
	}));
}

/** Names a server to connect to; a worker does so within seconds. */
export async function addSocket(
	app: App,
	actor: Actor | null,
	streamCode: string,
	input: SocketCreate
): Promise<{ id: string }> {
	requirePermission(actor, 'editStreams');
	try {
		return await writeTransaction(app, async (tx) => {
			const streamId = await streamIdOf(tx, streamCode);
			const [row] = await tx
				.insert(streamBroker)
				.values({ streamId, ...input })
				.returning({ id: streamBroker.id });
			return row!;
		});
	} catch (error) {
		if (databaseErrorOf(error)?.code !== '23505') throw error;
		const detail = 'This stream has a socket to this host and port.';
		throw new DomainError('nameTaken', detail, [{ pointer: '/host', detail }]);
	}
}

/** Switches a socket on or off; what is being taken in at that moment is settled first. */
export async function switchSocket(
	app: App,
	actor: Actor | null,
	streamCode: string,
	input: { socketId: string; enabled: boolean }
): Promise<void> {
	requirePermission(actor, 'editStreams');
	await writeTransaction(app, async (tx) => {
		const rows = await tx
			.update(streamBroker)
			.set({ enabled: input.enabled })
			.where(await socketOf(tx, streamCode, input.socketId))
			.returning({ id: streamBroker.id });
		if (rows.length === 0) throw new DomainError('notFound', 'There is no such socket.');
	});
}

/** Removes a socket; removing it twice is no error. What came by it is kept. */
export async function removeSocket(
	app: App,
	actor: Actor | null,
	streamCode: string,
	socketId: string
): Promise<void> {
	requirePermission(actor, 'editStreams');
	await writeTransaction(app, async (tx) => {
		await tx.delete(streamBroker).where(await socketOf(tx, streamCode, socketId));
	});
}

async function socketOf(executor: Executor, streamCode: string, id: string) {
	const streamId = await streamIdOf(executor, streamCode);
	return and(eq(streamBroker.id, id), eq(streamBroker.streamId, streamId));
}

async function streamIdOf(executor: Executor, code: string): Promise<string> {
	const [row] = await executor.select({ id: stream.id }).from(stream).where(eq(stream.code, code));
	if (!row) throw new DomainError('notFound', `There is no stream ${code}.`);
	return row.id;
}
