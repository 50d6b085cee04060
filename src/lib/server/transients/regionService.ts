import { and, desc, eq } from 'drizzle-orm';
import { jointRegion, type JointRegion, type RegionPoints } from '../../sky/regions/jointRegion';
import { formatArea } from '../../domain/area';
import type { App } from '../app';
import { liveParts, type LivePart } from '../alerts/alertStore';
import { oddsOfAgreement } from '../alerts/association';
import type { Transaction } from '../db/database';
import { region, transient } from '../db/schema/transients';
import { alert } from '../db/schema/alerts';
import { slot } from '../db/schema/slots';
import type { Change } from '../db/writeTransaction';
import { requestOutlook } from '../outlook/outlookRequests';
import { fadeOf } from '../outlook/outlookService';
import { endRetractedWork, tellOffTarget } from '../slots/offTarget';
import { standingNotFound } from '../reports/notFoundStore';
import { writeJournal } from './journalStore';

/**
 * Makes the joint region anew from a transient's live alerts and the reports of nothing that stand, as its
 * next version, and asks for the outlook. Without live alerts the transient is closed and its offers lapse.
 */
export async function deriveRegion(
	app: App,
	tx: Transaction,
	change: Change,
	transientId: string,
	cause: string
): Promise<void> {
	change.touch(transientId);
	const parts = await liveParts(tx, transientId);
	if (parts.length === 0) return closeWithoutAlerts(app, tx, transientId);
	const stored = await storeNextRegion(app, tx, transientId, parts, cause, { state: 'open' });
	await tellOffTarget(app, tx, transientId, stored);
	await requestOutlook(app, tx, transientId);
}

/**
 * The same after a report was made or withdrawn, which neither opens nor closes a transient. Call it with
 * the triage lock held.
 */
export async function followReports(
	app: App,
	tx: Transaction,
	change: Change,
	transientId: string,
	cause: string
): Promise<void> {
	const parts = await liveParts(tx, transientId);
	if (parts.length === 0) return;
	change.touch(transientId);
	await storeNextRegion(app, tx, transientId, parts, cause);
	await requestOutlook(app, tx, transientId);
}

async function storeNextRegion(
	app: App,
	tx: Transaction,
	transientId: string,
	parts: LivePart[],
	cause: string,
	also: { state?: 'open' } = {}
): Promise<{ version: number; points: RegionPoints }> {
	const t0 = new Date(Math.min(...parts.map((part) => part.t0.getTime())));
	const { joint, notFoundCount, tooFaintChance } = await regionNow(app, tx, transientId, parts, t0);
	const [before] = await tx
		.select({ version: region.version, area90Deg2: region.area90Deg2 })
		.from(region)
		.where(eq(region.transientId, transientId))
		.orderBy(desc(region.version))
		.limit(1);
	const version = (before?.version ?? 0) + 1;
	const now = app.now();
	await tx.insert(region).values({
		transientId,
		version,
		computedAt: now,
		cause,
		alertCount: parts.length,
		method: joint.method,
		raDeg: joint.centre.raDeg,
		decDeg: joint.centre.decDeg,
		sigmaDeg: joint.sigmaDeg,
		area50Deg2: joint.area50Deg2,
		area90Deg2: joint.area90Deg2,
		equivalentRadiusDeg: joint.equivalentRadiusDeg,
		logOddsAgreement: await oddsOfAgreement(app, parts),
		notFoundCount,
		tooFaintChance,
		points: joint.points,
		moc50: joint.moc50,
		moc90: joint.moc90
	});
	await tx
		.update(transient)
		.set({ regionVersion: version, t0, ...also })
		.where(eq(transient.id, transientId));
	await writeJournal(tx, {
		transientId,
		kind: 'regionChanged',
		at: now,
		actorId: null,
		summary: regionSummary(joint, before?.area90Deg2 ?? null),
		detail: {
			version,
			area90Deg2: joint.area90Deg2,
			before90Deg2: before?.area90Deg2 ?? null,
			cause
		}
	});
	return { version, points: joint.points };
}

type RegionNow = { joint: JointRegion; notFoundCount: number; tooFaintChance: number | null };

async function regionNow(
	app: App,
	tx: Transaction,
	transientId: string,
	parts: LivePart[],
	t0: Date
): Promise<RegionNow> {
	const shapes = parts.map((part) => part.shape);
	const reports = (await standingNotFound(tx, transientId)).filter(
		(report) => report.atMs >= t0.getTime()
	);
	const fade = reports.length > 0 ? await fadeOf(tx, transientId) : null;
	if (fade) {
		const input = { shapes, reports, t0Ms: t0.getTime(), fade };
		const searched = await app.compute.searchedRegion(input);
		return {
			joint: searched.region,
			notFoundCount: reports.length,
			tooFaintChance: searched.tooFaintChance
		};
	}
	// Circles have a closed form; anything else is meshed in a compute thread.
	const joint = shapes.every((shape) => shape.kind === 'circle')
		? jointRegion(shapes)
		: await app.compute.jointRegion(shapes);
	return { joint, notFoundCount: 0, tooFaintChance: null };
}

function regionSummary(joint: JointRegion, before90Deg2: number | null): string {
	const area = formatArea(joint.area90Deg2);
	if (joint.method === 'none') return `The alerts do not overlap; all of them are kept, ${area}`;
	if (before90Deg2 === null) return `Joint region ${area} (90 %)`;
	return `Joint region now ${area} (90 %), was ${formatArea(before90Deg2)}`;
}

async function closeWithoutAlerts(app: App, tx: Transaction, transientId: string): Promise<void> {
	const now = app.now();
	const retracted = (await tx.$count(alert, eq(alert.transientId, transientId))) > 0;
	if (retracted) await endRetractedWork(app, tx, transientId);
	await tx
		.update(transient)
		.set({ state: retracted ? 'retracted' : 'closed' })
		.where(eq(transient.id, transientId));
	await tx
		.update(slot)
		.set({ state: 'lapsed', endedAt: now })
		.where(and(eq(slot.transientId, transientId), eq(slot.state, 'offered')));
	await writeJournal(tx, {
		transientId,
		kind: retracted ? 'retracted' : 'closed',
		at: now,
		actorId: null,
		summary: retracted
			? 'Closed as retracted: no live alert is left'
			: 'Closed: its alerts belong to other transients'
	});
}
