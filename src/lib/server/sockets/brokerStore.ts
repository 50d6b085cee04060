import { and, eq, getTableColumns, isNull } from 'drizzle-orm';
import type { Executor } from '../db/database';
import { stream, streamBroker } from '../db/schema/alerts';
import type { StreamRow } from '../packets/readOutcome';
import { isHeld } from './brokerLock';

export type BrokerRow = typeof streamBroker.$inferSelect;

/** A broker that somebody should be connected to, its stream's settings, and whether somebody is at it. */
export type WantedBroker = { broker: BrokerRow; stream: StreamRow; held: boolean };

/** The brokers that are switched on, of streams in service. */
export async function wantedBrokers(executor: Executor): Promise<WantedBroker[]> {
	return executor
		.select({
			broker: getTableColumns(streamBroker),
			stream: getTableColumns(stream),
			held: isHeld(streamBroker.id)
		})
		.from(streamBroker)
		.innerJoin(stream, eq(stream.id, streamBroker.streamId))
		.where(and(eq(streamBroker.enabled, true), isNull(stream.retiredAt)));
}

export async function noteConnected(executor: Executor, id: string, at: Date): Promise<void> {
	await executor.update(streamBroker).set({ connectedAt: at }).where(eq(streamBroker.id, id));
}

export async function noteAlive(executor: Executor, id: string, at: Date): Promise<void> {
	await executor.update(streamBroker).set({ lastAliveAt: at }).where(eq(streamBroker.id, id));
}

/** Notes that there is no connection, with the reason; none when it was ended on purpose. */
export async function noteBroken(
	executor: Executor,
	id: string,
	at: Date,
	reason: string | null
): Promise<void> {
	await executor
		.update(streamBroker)
		.set({ connectedAt: null, ...(reason ? { lastError: reason, lastErrorAt: at } : {}) })
		.where(eq(streamBroker.id, id));
}
