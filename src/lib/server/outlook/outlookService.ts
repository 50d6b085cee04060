import { and, asc, desc, eq, lte, sql } from 'drizzle-orm';
import type { FadeModel, Outlook, OutlookInput } from '../../sky/outlook/outlook';
import type { App } from '../app';
import { writeTransaction } from '../db/writeTransaction';
import type { Executor } from '../db/database';
import { alert, stream } from '../db/schema/alerts';
import { outlook, region, transient } from '../db/schema/transients';
import { refreshOffers } from '../slots/slotOffers';
import { telescopeSpecs } from './telescopeSpecs';

/** How far ahead the outlook looks, hours. */
export const OUTLOOK_SPAN_HOURS = 24;

export type OutlookBasis = Pick<OutlookInput, 't0Ms' | 'centre' | 'points' | 'fade'> & {
	regionVersion: number;
};

/** What an outlook starts from: the region in force and the fade of the stream that heard it first. */
export async function outlookBasis(
	executor: Executor,
	transientId: string
): Promise<OutlookBasis | null> {
	const [latest] = await executor
		.select({
			t0: transient.t0,
			version: region.version,
			raDeg: region.raDeg,
			decDeg: region.decDeg,
			points: region.points
		})
		.from(region)
		.innerJoin(transient, eq(transient.id, region.transientId))
		.where(eq(region.transientId, transientId))
		.orderBy(desc(region.version))
		.limit(1);
	const fade = await fadeOf(executor, transientId);
	if (!latest || !fade) return null;
	return {
		t0Ms: latest.t0.getTime(),
		centre: { raDeg: latest.raDeg, decDeg: latest.decDeg },
		points: latest.points,
		fade,
		regionVersion: latest.version
	};
}

/** The fade of the stream that heard a transient first; null without alerts. */
export async function fadeOf(executor: Executor, transientId: string): Promise<FadeModel | null> {
	const [first] = await executor
		.select({ fade: stream.fade })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(eq(alert.transientId, transientId))
		.orderBy(desc(alert.live), asc(alert.t0))
		.limit(1);
	return first?.fade ?? null;
}

/** Computes and stores a transient's outlook; one of an older region never replaces a newer one. */
export async function refreshOutlook(app: App, transientId: string): Promise<void> {
	const [row] = await app.database
		.select({ state: transient.state })
		.from(transient)
		.where(eq(transient.id, transientId));
	if (row?.state !== 'open') return;
	const basis = await outlookBasis(app.database, transientId);
	if (!basis) return;
	const { text, ...figures } = await app.compute.outlookText(
		await outlookInput(app, basis, app.now())
	);
	await writeTransaction(app, async (tx, change) => {
		const values = {
			regionVersion: basis.regionVersion,
			computedAt: new Date(figures.computedMs),
			networkCatch: figures.networkCatch,
			costOfWaitingPoints: figures.costOfWaitingPoints,
			// As the thread wrote it: an outlook is large, and this process has people to answer.
			body: sql<Outlook>`${text}::jsonb`
		};
		const stored = await tx
			.insert(outlook)
			.values({ transientId, ...values })
			.onConflictDoUpdate({
				target: outlook.transientId,
				set: values,
				setWhere: and(
					lte(outlook.regionVersion, basis.regionVersion),
					lte(outlook.computedAt, values.computedAt)
				)
			})
			.returning({ transientId: outlook.transientId });
		if (stored.length === 0) return;
		const rows = () => (JSON.parse(text) as Outlook).rows;
		await refreshOffers(tx, transientId, rows, basis.regionVersion, app.now());
		change.touch(transientId);
	});
}

/** An outlook from now, or from `from`, for all telescopes or one. */
export async function computeOutlookFor(
	app: App,
	basis: OutlookBasis,
	options: { from?: Date; telescopeId?: string } = {}
): Promise<Outlook> {
	const from = options.from ?? app.now();
	return app.compute.outlook(await outlookInput(app, basis, from, options.telescopeId));
}

async function outlookInput(
	app: App,
	{ t0Ms, centre, points, fade }: OutlookBasis,
	from: Date,
	telescopeId?: string
): Promise<OutlookInput> {
	const { specs } = await telescopeSpecs(app.database, from, telescopeId);
	return {
		nowMs: from.getTime(),
		spanHours: OUTLOOK_SPAN_HOURS,
		t0Ms,
		centre,
		points,
		telescopes: specs,
		fade
	};
}
