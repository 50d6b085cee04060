import { and, desc, eq, exists, inArray, isNotNull, isNull } from 'drizzle-orm';
import type { PartnerReport, PartnerReportRow } from '../../domain/partnerReport';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import type { Executor } from '../db/database';
import { circular } from '../db/schema/circulars';
import { report } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { reportSummary } from '../reports/reportSummary';
import { writeJournal } from '../transients/journalStore';

/** A report may be dated this far ahead of the server's clock. */
const CLOCK_GRACE_MS = 5 * 60_000;
const MOST_CHOICES = 100;

/** The transients that a partner knows of: those with a published circular, latest first. */
export async function reportableTransients(
	app: App,
	actor: Actor | null
): Promise<{ designation: string; t0: string }[]> {
	requirePermission(actor, 'reportAsPartner');
	const rows = await app.database
		.select({ designation: transient.designation, t0: transient.t0 })
		.from(transient)
		.where(isShared(app.database))
		.orderBy(desc(transient.t0))
		.limit(MOST_CHOICES);
	return rows.map(({ designation, t0 }) => ({ designation, t0: t0.toISOString() }));
}

/** Keeps what a partner saw with their own telescope. The same report sent twice is one report. */
export async function reportAsPartner(
	app: App,
	actor: Actor | null,
	input: PartnerReport
): Promise<{ reportId: string }> {
	requirePermission(actor, 'reportAsPartner');
	return writeTransaction(app, async (tx, change) => {
		const now = app.now();
		const observedAt = new Date(input.observedAt);
		if (observedAt.getTime() > now.getTime() + CLOCK_GRACE_MS) {
			throw new DomainError('invalid', 'The observation lies in the future.', [
				{ pointer: '/observedAt', detail: 'must not lie in the future' }
			]);
		}
		const [subject] = await tx
			.select({ id: transient.id })
			.from(transient)
			.where(and(eq(transient.designation, input.designation), isShared(tx)));
		if (!subject) {
			throw new DomainError('notFound', `No circular has been published on ${input.designation}.`);
		}
		const [stored] = await tx
			.insert(report)
			.values({
				id: input.reportId,
				transientId: subject.id,
				kind: input.kind,
				filter: input.filter,
				observedAt,
				exposureS: input.exposureS ?? null,
				magnitude: input.magnitude ?? null,
				magnitudeError: input.magnitudeError ?? null,
				limitMag: input.limitMag ?? null,
				remarks: input.remarks,
				reportedBy: actor.id,
				reportedAt: now
			})
			.onConflictDoNothing()
			.returning({ id: report.id });
		if (!stored) return { reportId: await requireOwnReport(tx, actor, input.reportId) };
		await writeJournal(tx, {
			transientId: subject.id,
			kind: 'reported',
			at: now,
			actorId: actor.id,
			summary: `A partner reports: ${reportSummary(input)}`,
			detail: { reportId: stored.id, kind: input.kind, partner: true }
		});
		change.touch(subject.id);
		return { reportId: stored.id };
	});
}

/** What the partner has sent, latest first. */
export async function listOwnReports(app: App, actor: Actor | null): Promise<PartnerReportRow[]> {
	requirePermission(actor, 'reportAsPartner');
	const rows = await app.database
		.select({ report, designation: transient.designation })
		.from(report)
		.innerJoin(transient, eq(transient.id, report.transientId))
		.where(
			and(
				eq(report.reportedBy, actor.id),
				isNull(report.telescopeId),
				isNull(report.withdrawnAt),
				inArray(report.kind, ['detection', 'limit'])
			)
		)
		.orderBy(desc(report.reportedAt))
		.limit(200);
	return rows.map(({ report: row, designation }) => ({
		designation,
		kind: row.kind === 'detection' ? 'detection' : 'limit',
		filter: row.filter,
		observedAt: row.observedAt.toISOString(),
		reportedAt: row.reportedAt.toISOString(),
		magnitude: row.magnitude,
		magnitudeError: row.magnitudeError,
		limitMag: row.limitMag,
		remarks: row.remarks
	}));
}

function isShared(executor: Executor) {
	return exists(
		executor
			.select({ id: circular.id })
			.from(circular)
			.where(and(eq(circular.transientId, transient.id), isNotNull(circular.publishedAt)))
	);
}

async function requireOwnReport(
	executor: Executor,
	actor: Actor,
	reportId: string
): Promise<string> {
	const [known] = await executor
		.select({ reportedBy: report.reportedBy })
		.from(report)
		.where(eq(report.id, reportId));
	if (known?.reportedBy !== actor.id) {
		throw new DomainError('wrongState', 'This form belongs to another report. Open it again.');
	}
	return reportId;
}
