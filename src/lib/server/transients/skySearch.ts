import { and, desc, eq, ne, sql, type SQL } from 'drizzle-orm';
import type { OverlappingAlert, TouchingTransient } from '../../domain/skySearch';
import { normaliseDeg, type Equatorial } from '../../sky/angle';
import { coneMoc } from '../../sky/moc/coneMoc';
import type { MocRanges } from '../../sky/moc/moc';
import { angleBetweenDeg, toVector } from '../../sky/vector';
import { requirePermission, type Actor } from '../actor';
import { alertSky } from '../alerts/alertSky';
import type { App } from '../app';
import type { Executor } from '../db/database';
import { alert, stream } from '../db/schema/alerts';
import { region, transient } from '../db/schema/transients';
import { DomainError } from '../domainError';

/** Most answers to one search, newest first. */
const MOST = 500;

export type Patch = Equatorial & {
	radiusDeg: number;
	/** Which of the joint region's areas must touch the patch, %. */
	credible?: 50 | 90;
};

/**
 * Transients whose joint region, in its latest version, touches a circular patch, newest T0 first, 500 at
 * most. Both are covered by cells that reach out by some 4 % of their radii, so a near miss may be among them
 * and no touch is missing.
 */
export async function transientsTouching(
	app: App,
	actor: Actor | null,
	patch: Patch
): Promise<TouchingTransient[]> {
	requirePermission(actor, 'viewTransients');
	const centre = { raDeg: normaliseDeg(patch.raDeg), decDeg: patch.decDeg };
	const rows = await touchingRows(
		app.database,
		coneMoc(centre, patch.radiusDeg),
		patch.credible ?? 90
	);
	const middle = toVector(centre);
	return rows.map(({ t0, raDeg, decDeg, ...row }) => ({
		...row,
		t0: t0.toISOString(),
		centre: { raDeg, decDeg },
		separationDeg: angleBetweenDeg(middle, toVector({ raDeg, decDeg }))
	}));
}

/** The search itself; awaiting it runs it. */
export function touchingRows(executor: Executor, patch: MocRanges, credible: 50 | 90) {
	return executor
		.select({
			designation: transient.designation,
			t0: transient.t0,
			state: transient.state,
			isTest: transient.isTest,
			isDrill: transient.isDrill,
			raDeg: region.raDeg,
			decDeg: region.decDeg,
			area90Deg2: region.area90Deg2
		})
		.from(region)
		.innerJoin(
			transient,
			and(eq(transient.id, region.transientId), eq(transient.regionVersion, region.version))
		)
		.where(touches(skyRegionParameter(patch), credible))
		.orderBy(desc(transient.t0), desc(transient.designation))
		.limit(MOST);
}

/** Ids of the transients that `transientsTouching` finds, all of them, for use in another query. */
export function idsTouching(executor: Executor, { radiusDeg, ...patch }: Patch) {
	const centre = { raDeg: normaliseDeg(patch.raDeg), decDeg: patch.decDeg };
	return executor
		.select({ id: region.transientId })
		.from(region)
		.innerJoin(
			transient,
			and(eq(transient.id, region.transientId), eq(transient.regionVersion, region.version))
		)
		.where(touches(skyRegionParameter(coneMoc(centre, radiusDeg)), patch.credible ?? 90));
}

/** The half area lies in the 90 % one, whose index serves both. */
function touches(cells: SQL, credible: 50 | 90): SQL | undefined {
	return and(
		sql`${region.moc90} && ${cells}`,
		credible === 50 ? sql`${region.moc50} && ${cells}` : undefined
	);
}

/**
 * Alerts whose own 90 % area overlaps this alert's, newest T0 first, 500 at most; withdrawn ones are among
 * them, marked. Null for a retraction, which has no area.
 *
 * @throws DomainError `notFound` when there is no such alert.
 */
export async function alertsOverlapping(
	app: App,
	actor: Actor | null,
	alertId: string
): Promise<OverlappingAlert[] | null> {
	requirePermission(actor, 'viewTransients');
	const [own] = await app.database
		.select({ moc90: alert.moc90, shape: alert.shape })
		.from(alert)
		.where(eq(alert.id, alertId));
	if (!own) throw new DomainError('notFound', 'There is no such alert.');
	// The job that works it out for good may not have come to it yet.
	const moc90 = own.moc90 ?? (own.shape ? await alertSky(app, own.shape) : null);
	if (!moc90) return null;
	const rows = await overlappingRows(app.database, alertId, moc90);
	return rows.map(({ t0, ...row }) => ({ ...row, t0: t0.toISOString() }));
}

/** The search itself; awaiting it runs it. */
export function overlappingRows(executor: Executor, alertId: string, moc90: MocRanges) {
	return executor
		.select({
			alertId: alert.id,
			streamCode: stream.code,
			streamName: stream.name,
			packetId: alert.packetId,
			serial: alert.serial,
			t0: alert.t0,
			live: alert.live,
			designation: transient.designation
		})
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.innerJoin(transient, eq(transient.id, alert.transientId))
		.where(and(ne(alert.id, alertId), sql`${alert.moc90} && ${skyRegionParameter(moc90)}`))
		.orderBy(desc(alert.t0), desc(alert.id))
		.limit(MOST);
}

function skyRegionParameter(ranges: MocRanges) {
	return sql`${sql.param(ranges, region.moc90)}::int8multirange`;
}
