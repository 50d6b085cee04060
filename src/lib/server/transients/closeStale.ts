import { and, eq, lt, notExists, or } from 'drizzle-orm';
import type { App } from '../app';
import { writeTransaction } from '../db/writeTransaction';
import { slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { sql } from 'drizzle-orm';
import { lapseSlots } from '../slots/slotOffers';
import { writeJournal } from './journalStore';

/** A dropped transient stays on the board this long, so that a slip of the thumb can be undone. */
const DROPPED_STAYS_MINUTES = 30;
/** Without claims to come, a transient leaves the board this long after T0. */
const OPEN_HOURS = 72;

/** Closes transients that were dropped or have grown old, and lets unused slots lapse. */
export async function closeStaleTransients(app: App): Promise<void> {
	const now = app.now();
	const droppedBefore = new Date(now.getTime() - DROPPED_STAYS_MINUTES * 60_000);
	const t0Before = new Date(now.getTime() - OPEN_HOURS * 3_600_000);
	await writeTransaction(app, async (tx, change) => {
		const claimsToCome = tx
			.select({ id: slot.id })
			.from(slot)
			.where(
				and(
					eq(slot.transientId, transient.id),
					sql`${slot.state} in ('claimed', 'on sky')`,
					sql`upper(${slot.during}) > ${now.toISOString()}`
				)
			);
		const closed = await tx
			.update(transient)
			.set({ state: 'closed' })
			.where(
				and(
					eq(transient.state, 'open'),
					or(
						and(eq(transient.decision, 'drop'), lt(transient.decidedAt, droppedBefore)),
						and(lt(transient.t0, t0Before), notExists(claimsToCome))
					)
				)
			)
			.returning({ id: transient.id, decision: transient.decision });
		for (const { id, decision } of closed) {
			change.touch(id);
			await writeJournal(tx, {
				transientId: id,
				kind: 'closed',
				at: now,
				actorId: null,
				summary:
					decision === 'drop' ? 'Closed after it was dropped' : `Closed ${OPEN_HOURS} h after T0`
			});
		}
		await lapseSlots(tx, change, now);
	});
}
