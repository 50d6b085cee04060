import { eq } from 'drizzle-orm';
import { REPORT_KIND_LABELS } from '../../domain/vocabulary';
import type { ReportInput } from '../../domain/slot';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { report, slot } from '../db/schema/slots';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { lockOwnSlot, requireTransition } from '../slots/slotService';
import { writeJournal, type JournalEntry } from '../transients/journalStore';

/** A report may be dated this far ahead of the server's clock. */
const CLOCK_GRACE_MS = 5 * 60_000;

/** Records what came of a slot and ends it. A report of an exposure nobody announced says when it began. */
export async function reportSlot(
	app: App,
	actor: Actor | null,
	slotId: string,
	input: ReportInput
): Promise<{ reportId: string }> {
	requirePermission(actor, 'reportSlot');
	return writeTransaction(app, async (tx, change) => {
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
		return { reportId: stored!.id };
	});
}

/** A report in one short phrase: "Detection, R = 19.32 ± 0.05". */
export function reportSummary(
	input: Pick<ReportInput, 'kind' | 'filter' | 'magnitude' | 'magnitudeError' | 'limitMag'>
): string {
	const label = REPORT_KIND_LABELS[input.kind];
	if (input.kind === 'detection') {
		return `${label}, ${input.filter} = ${input.magnitude?.toFixed(2)} ± ${input.magnitudeError?.toFixed(2)}`;
	}
	if (input.kind === 'limit') return `${label}, ${input.filter} > ${input.limitMag?.toFixed(2)}`;
	return label;
}

function clampDate(ms: number, low: Date, high: Date): Date {
	return new Date(Math.min(Math.max(ms, low.getTime()), high.getTime()));
}
