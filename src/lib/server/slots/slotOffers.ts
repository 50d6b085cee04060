import { and, eq, inArray, sql } from 'drizzle-orm';
import type { OutlookRow, PlannedTile } from '../../sky/outlook/outlook';
import type { Executor } from '../db/database';
import { telescope } from '../db/schema/network';
import { slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import type { Change } from '../db/writeTransaction';
import { writeJournal } from '../transients/journalStore';

/** A telescope whose catch is lower than this is not offered. */
const LEAST_CATCH_OFFERED = 0.01;
/** Shortest slot: slewing, focusing and one exposure that is worth it (common practice, no source). */
export const LEAST_SLOT_MINUTES = 10;
/** A claim nobody began lapses this long after its end. */
const LAPSE_AFTER_MINUTES = 60;

/** The time a row's plan takes from its first window's opening, at least ten minutes, inside the window. */
export function proposedRange(row: OutlookRow, fromMs: number): { start: Date; end: Date } | null {
	const window = row.windows.find((item) => item.endMs > fromMs);
	if (!window) return null;
	const startMs = Math.max(window.startMs, fromMs);
	const last = row.plan.filter((tile) => tile.startMs < window.endMs).at(-1);
	const planEndMs = last ? last.startMs + last.exposureS * 1000 : startMs;
	const endMs = Math.min(window.endMs, Math.max(planEndMs, startMs + LEAST_SLOT_MINUTES * 60_000));
	return endMs > startMs ? { start: new Date(startMs), end: new Date(endMs) } : null;
}

/** The plan's tiles that start inside the range. */
export function tilesWithin(plan: PlannedTile[], range: { start: Date; end: Date }): PlannedTile[] {
	return plan.filter(
		(tile) => tile.startMs >= range.start.getTime() && tile.startMs < range.end.getTime()
	);
}

/**
 * Makes the offered slots of a chased transient follow its outlook: one per telescope that could
 * catch it and has no live claim; offers that no longer fit lapse. The outlook's rows are asked for only
 * when they are needed.
 */
export async function refreshOffers(
	tx: Executor,
	transientId: string,
	outlookRows: () => OutlookRow[],
	regionVersion: number,
	now: Date
): Promise<void> {
	const [owner] = await tx
		.select({ decision: transient.decision, state: transient.state, isTest: transient.isTest })
		.from(transient)
		.where(eq(transient.id, transientId));
	const chased = owner?.decision === 'chase' && owner.state === 'open' && !owner.isTest;
	const present = await tx
		.select({ id: slot.id, telescopeId: slot.telescopeId, state: slot.state })
		.from(slot)
		.where(
			and(
				eq(slot.transientId, transientId),
				inArray(slot.state, ['offered', 'claimed', 'on sky', 'reported'])
			)
		);
	const wanted = chased
		? outlookRows().filter(
				(row) =>
					row.catch >= LEAST_CATCH_OFFERED &&
					!present.some((item) => item.telescopeId === row.telescopeId && item.state !== 'offered')
			)
		: [];
	const depths = await tx.select({ id: telescope.id, depths: telescope.depths }).from(telescope);
	const offered = new Map(
		present.filter((item) => item.state === 'offered').map((item) => [item.telescopeId, item.id])
	);
	let added = 0;
	for (const row of wanted) {
		const range = proposedRange(row, now.getTime());
		if (!range) continue;
		const values = {
			during: range,
			tiles: tilesWithin(row.plan, range),
			catch: row.catch,
			regionVersion
		};
		const id = offered.get(row.telescopeId);
		offered.delete(row.telescopeId);
		if (id) {
			// Somebody may claim it meanwhile: only a slot that is still offered moves.
			await tx
				.update(slot)
				.set(values)
				.where(and(eq(slot.id, id), eq(slot.state, 'offered')));
			continue;
		}
		added++;
		await tx.insert(slot).values({
			...values,
			transientId,
			telescopeId: row.telescopeId,
			state: 'offered',
			filter: depths.find((item) => item.id === row.telescopeId)?.depths[0]?.filter ?? '',
			exposureS: row.plan[0]?.exposureS ?? 0
		});
	}
	if (offered.size > 0) {
		await tx
			.update(slot)
			.set({ state: 'lapsed', endedAt: now })
			.where(and(inArray(slot.id, [...offered.values()]), eq(slot.state, 'offered')));
	}
	if (added > 0) {
		await writeJournal(tx, {
			transientId,
			kind: 'slotOffered',
			at: now,
			actorId: null,
			summary: added === 1 ? 'One slot offered' : `${added} slots offered`,
			detail: { count: added }
		});
	}
}

/** Lets offers whose time is over and claims that nobody began lapse. */
export async function lapseSlots(tx: Executor, change: Change, now: Date): Promise<void> {
	const overBy = (minutes: number) =>
		sql`upper(${slot.during}) < ${new Date(now.getTime() - minutes * 60_000).toISOString()}`;
	const lapsed = await tx
		.update(slot)
		.set({ state: 'lapsed', endedAt: now })
		.where(
			sql`(${slot.state} = 'offered' and ${overBy(0)}) or (${slot.state} = 'claimed' and ${overBy(LAPSE_AFTER_MINUTES)})`
		)
		.returning({
			transientId: slot.transientId,
			telescopeId: slot.telescopeId,
			claimedBy: slot.claimedBy
		});
	for (const item of lapsed) {
		change.touch(item.transientId);
		if (!item.claimedBy) continue;
		const [row] = await tx
			.select({ name: telescope.name })
			.from(telescope)
			.where(eq(telescope.id, item.telescopeId));
		await writeJournal(tx, {
			transientId: item.transientId,
			kind: 'slotLapsed',
			at: now,
			actorId: null,
			summary: `The claim of ${row?.name ?? 'a telescope'} lapsed unused`,
			detail: { telescopeId: item.telescopeId }
		});
	}
}
