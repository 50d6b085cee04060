import { and, eq, lt } from 'drizzle-orm';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { delivery } from '../db/schema/circulars';
import { DomainError } from '../domainError';
import { deliverCircularJob } from './deliverCircularJob';
import { updateDelivery } from './deliveryStore';

/** A delivery older than this has been forgotten by the queue, as after a crash on its last try. */
const FORGOTTEN_AFTER_MS = 3 * 3_600_000;

/** A steward's "try again" of a failed delivery. */
export async function retryDelivery(
	app: App,
	actor: Actor | null,
	deliveryId: string
): Promise<void> {
	requirePermission(actor, 'retryDelivery');
	await app.database.transaction(async (tx) => {
		const [row] = await tx
			.select({ state: delivery.state })
			.from(delivery)
			.where(eq(delivery.id, deliveryId))
			.for('update');
		if (!row) throw new DomainError('notFound', 'There is no such delivery.');
		if (row.state !== 'failed') {
			throw new DomainError(
				'wrongState',
				row.state === 'sent' ? 'It has been sent meanwhile.' : 'It is waiting to go out already.'
			);
		}
		await updateDelivery(tx, deliveryId, {
			state: 'queued',
			attempts: 0,
			queuedAt: app.now(),
			endedAt: null
		});
		await app.queue.enqueue(tx, deliverCircularJob, { deliveryId });
	});
}

/** Marks deliveries that the queue has given up on as failed, so that a steward sees them. */
export async function failForgottenDeliveries(app: App): Promise<void> {
	await app.database
		.update(delivery)
		.set({
			state: 'failed',
			endedAt: app.now(),
			lastError: 'It was never tried to the end'
		})
		.where(
			and(
				eq(delivery.state, 'queued'),
				lt(delivery.queuedAt, new Date(app.now().getTime() - FORGOTTEN_AFTER_MS))
			)
		);
}
