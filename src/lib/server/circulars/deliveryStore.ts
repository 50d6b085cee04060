import { and, eq, sql } from 'drizzle-orm';
import type { Executor, Transaction } from '../db/database';
import { circular, delivery, pushDevice, subscription } from '../db/schema/circulars';
import { telescope } from '../db/schema/network';
import { person } from '../db/schema/people';
import { outlook, transient } from '../db/schema/transients';

/**
 * Locks one delivery that still has to go out, with all it takes to send it; null when it has gone,
 * failed, or another worker is at it.
 */
export async function lockQueuedDelivery(tx: Transaction, deliveryId: string) {
	const [row] = await tx
		.select({
			id: delivery.id,
			channel: delivery.channel,
			attempts: delivery.attempts,
			circularId: circular.id,
			number: circular.number,
			title: circular.title,
			body: circular.body,
			publishedAt: circular.publishedAt,
			transientId: transient.id,
			designation: transient.designation,
			author: sql<string>`(select name from ${person} where id = ${circular.authorId})`,
			personId: person.id,
			personName: person.name,
			email: person.email,
			roles: person.roles,
			disabledAt: person.disabledAt,
			telescopeId: subscription.telescopeId
		})
		.from(delivery)
		.innerJoin(circular, eq(circular.id, delivery.circularId))
		.innerJoin(transient, eq(transient.id, circular.transientId))
		.innerJoin(person, eq(person.id, delivery.personId))
		.leftJoin(subscription, eq(subscription.personId, delivery.personId))
		.where(and(eq(delivery.id, deliveryId), eq(delivery.state, 'queued')))
		.for('update', { of: delivery, skipLocked: true });
	return row ?? null;
}

export type QueuedDelivery = NonNullable<Awaited<ReturnType<typeof lockQueuedDelivery>>>;

/** A telescope and its row of the transient's latest outlook. */
export async function readTelescopeOutlook(
	executor: Executor,
	transientId: string,
	telescopeId: string
) {
	const [row] = await executor
		.select({ name: telescope.name, computedAt: outlook.computedAt, body: outlook.body })
		.from(telescope)
		.leftJoin(outlook, eq(outlook.transientId, transientId))
		.where(eq(telescope.id, telescopeId));
	if (!row) return null;
	return {
		name: row.name,
		computedAt: row.computedAt,
		row: row.body?.rows.find((candidate) => candidate.telescopeId === telescopeId) ?? null
	};
}

export type TelescopeOutlook = NonNullable<Awaited<ReturnType<typeof readTelescopeOutlook>>>;

export async function updateDelivery(
	executor: Executor,
	deliveryId: string,
	values: Partial<typeof delivery.$inferInsert>
): Promise<void> {
	await executor.update(delivery).set(values).where(eq(delivery.id, deliveryId));
}

export function readPushTargets(executor: Executor, personId: string) {
	return executor
		.select({
			id: pushDevice.id,
			name: pushDevice.name,
			endpoint: pushDevice.endpoint,
			p256dh: pushDevice.p256dh,
			auth: pushDevice.auth
		})
		.from(pushDevice)
		.where(eq(pushDevice.personId, personId))
		.orderBy(pushDevice.createdAt);
}

export async function removePushTarget(executor: Executor, deviceId: string): Promise<void> {
	await executor.delete(pushDevice).where(eq(pushDevice.id, deviceId));
}

export async function markPushSent(executor: Executor, deviceId: string, at: Date): Promise<void> {
	await executor.update(pushDevice).set({ lastSentAt: at }).where(eq(pushDevice.id, deviceId));
}
