import { eq } from 'drizzle-orm';
import { requirePermission, type Actor } from '../actor';
import { lockTriage } from '../alerts/alertStore';
import type { App } from '../app';
import { telescope } from '../db/schema/network';
import { report } from '../db/schema/slots';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { writeJournal } from '../transients/journalStore';
import { followReports } from '../transients/regionService';
import { reportSummary } from './reportSummary';

/**
 * Takes a report back; by who made it, or a steward. It stays in the journal and counts nowhere, and the
 * region is as if it had never been made. Withdrawing it again changes nothing.
 */
export async function withdrawReport(
	app: App,
	actor: Actor | null,
	reportId: string,
	reason: string
): Promise<void> {
	requirePermission(actor, 'withdrawReport');
	await writeTransaction(app, async (tx, change) => {
		await lockTriage(tx);
		const [row] = await tx.select().from(report).where(eq(report.id, reportId)).for('update');
		if (!row) throw new DomainError('notFound', 'There is no such report.');
		if (row.reportedBy !== actor.id && !actor.roles.includes('steward')) {
			throw new DomainError('notAllowed', 'Only who made this report, or a steward, may do that.');
		}
		if (row.withdrawnAt) return;
		const now = app.now();
		await tx
			.update(report)
			.set({ withdrawnAt: now, withdrawnBy: actor.id })
			.where(eq(report.id, reportId));
		const [scope] = row.telescopeId
			? await tx
					.select({ name: telescope.name })
					.from(telescope)
					.where(eq(telescope.id, row.telescopeId))
			: [];
		const name = scope?.name ?? 'a partner';
		change.touch(row.transientId);
		await writeJournal(tx, {
			transientId: row.transientId,
			kind: 'reportWithdrawn',
			at: now,
			actorId: actor.id,
			summary: `Report of ${name} withdrawn (${reportSummary(row)}): ${reason}`,
			detail: { reportId, telescopeId: row.telescopeId, reason }
		});
		if (row.kind === 'limit') {
			await followReports(app, tx, change, row.transientId, `The report of ${name} was withdrawn`);
		}
	});
}
