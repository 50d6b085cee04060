import { eq } from 'drizzle-orm';
import type { ReportInput } from '../../domain/slot';
import { requirePermission, type Actor } from '../actor';
import { lockTriage } from '../alerts/alertStore';
import type { App } from '../app';
import { report, slot } from '../db/schema/slots';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { lockOwnSlot, requireTransition } from '../slots/slotService';
import { writeJournal, type JournalEntry } from '../transients/journalStore';
import { followReports } from '../transients/regionService';
import { reportSummary } from './reportSummary';

/** A report may be dated this far ahead of the server's clock. */
const CLOCK_GRACE_MS = 5 * 60_000;

/**
 * Records what came of a slot and ends it. A report of an exposure nobody announced says when it began; one
 * of nothing moves the region away from where the telescope looked.
 */
export async function reportSlot(
	app: App,
	actor: Actor | null,
	slotId: string,
	input: ReportInput
): Promise<{ reportId: string }> {
	requirePermission(actor, 'reportSlot');
	return writeTransaction(app, async (tx, change) => {
		// A limit makes the region's next version, as alerts do: one at a time.
		if (input.kind === 'limit') await lockTriage(tx);
		const { row, telescopeName } = await lockOwnSlot(tx, actor, slotId);
		requireTransition(row.state, 'reported');
		const now = app.now();
		const observedAt = new Date(input.observedAt);
		if (observedAt.getTime() > now.getTime() + CLOCK_GRACE_MS) {
			throw new DomainError('invalid', 'The observation lies in the future.', [
				{ pointer: '/observedAt', detail: 'must not lie in the future' }
			]);
		}
		const exposed = input.kind === 'detection' || input.kind === 'limit';
		const beganMs = observedAt.getTime() - ((input.exposureS ?? 0) * 1000) / 2;
		const onSkyAt = row.onSkyAt ?? (exposed ? clampDate(beganMs, row.claimedAt ?? now, now) : null);
		const [stored] = await tx
			.insert(report)
			.values({
				slotId,
				transientId: row.transientId,
				telescopeId: row.telescopeId,
				kind: input.kind,
				filter: input.filter ?? row.filter,
				observedAt,
				exposureS: input.exposureS ?? null,
				magnitude: input.magnitude ?? null,
				magnitudeError: input.magnitudeError ?? null,
				limitMag: input.limitMag ?? null,
				raDeg: input.raDeg ?? null,
				decDeg: input.decDeg ?? null,
				remarks: input.remarks,
				reportedBy: actor.id,
				reportedAt: now
			})
			.returning({ id: report.id });
		await tx
			.update(slot)
			.set({ state: 'reported', endedAt: now, onSkyAt })
			.where(eq(slot.id, slotId));
		change.touch(row.transientId);
		const entries: JournalEntry[] = [];
		const common = { transientId: row.transientId, actorId: actor.id };
		const detail = { slotId, telescopeId: row.telescopeId };
		if (!row.onSkyAt && onSkyAt) {
			entries.push({
				...common,
				kind: 'onSky',
				at: onSkyAt,
				summary: `${telescopeName} was on sky, as its report says`,
				detail
			});
		}
		entries.push({
			...common,
			kind: 'reported',
			at: now,
			summary: `${telescopeName}: ${reportSummary(input)}`,
			detail: { ...detail, reportId: stored!.id, kind: input.kind }
		});
		await writeJournal(tx, ...entries);
		if (input.kind === 'limit') {
			const cause = `${telescopeName} saw nothing to ${input.filter ?? row.filter} ${input.limitMag?.toFixed(1)}`;
			await followReports(app, tx, change, row.transientId, cause);
		}
		return { reportId: stored!.id };
	});
}

function clampDate(ms: number, low: Date, high: Date): Date {
	return new Date(Math.min(Math.max(ms, low.getTime()), high.getTime()));
}
