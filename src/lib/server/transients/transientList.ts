import { and, desc, eq, ilike, inArray, isNull, lt, sql } from 'drizzle-orm';
import type { Decision, TransientState } from '../../domain/vocabulary';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { alert, stream } from '../db/schema/alerts';
import { person } from '../db/schema/people';
import { report } from '../db/schema/slots';
import { region, transient } from '../db/schema/transients';
import { idsTouching, type Patch } from './skySearch';

export type TransientListItem = {
	designation: string;
	t0: string;
	state: TransientState;
	isTest: boolean;
	isDrill: boolean;
	decision: Decision | null;
	takenBy: string | null;
	streamNames: string[];
	area90Deg2: number | null;
	detections: number;
};

export type TransientListQuery = {
	/** Part of a designation. */
	search?: string;
	state?: TransientState;
	decision?: Decision;
	/** Only those whose joint region touches this patch of the sky. */
	patch?: Patch;
	/** Only T0 before this instant: the next page. */
	before?: Date;
	limit?: number;
};

/** All transients, newest T0 first, a page at a time. */
export async function listTransients(
	app: App,
	actor: Actor | null,
	query: TransientListQuery = {}
): Promise<{ items: TransientListItem[]; nextBefore: string | null }> {
	requirePermission(actor, 'viewTransients');
	const limit = Math.min(query.limit ?? 50, 200);
	const { database } = app;
	const rows = await database
		.select({ transient, takenBy: person.name })
		.from(transient)
		.leftJoin(person, eq(person.id, transient.takenBy))
		.where(
			and(
				query.search
					? ilike(transient.designation, `%${query.search.replace(/[\\%_]/g, '\\$&')}%`)
					: undefined,
				query.state ? eq(transient.state, query.state) : undefined,
				query.decision ? eq(transient.decision, query.decision) : undefined,
				query.patch ? inArray(transient.id, idsTouching(database, query.patch)) : undefined,
				query.before ? lt(transient.t0, query.before) : undefined
			)
		)
		.orderBy(desc(transient.t0))
		.limit(limit + 1);
	const page = rows.slice(0, limit);
	const ids = page.map((row) => row.transient.id);
	if (ids.length === 0) return { items: [], nextBefore: null };
	const [areas, streams, detections] = await Promise.all([
		database
			.select({ id: region.transientId, area90Deg2: region.area90Deg2 })
			.from(region)
			.innerJoin(
				transient,
				and(eq(transient.id, region.transientId), eq(transient.regionVersion, region.version))
			)
			.where(inArray(region.transientId, ids)),
		database
			.selectDistinct({ id: alert.transientId, name: stream.name })
			.from(alert)
			.innerJoin(stream, eq(stream.id, alert.streamId))
			.where(inArray(alert.transientId, ids)),
		database
			.select({ id: report.transientId, count: sql<number>`count(*)::int` })
			.from(report)
			.where(
				and(
					inArray(report.transientId, ids),
					eq(report.kind, 'detection'),
					isNull(report.withdrawnAt)
				)
			)
			.groupBy(report.transientId)
	]);
	return {
		items: page.map(({ transient: row, takenBy }) => ({
			designation: row.designation,
			t0: row.t0.toISOString(),
			state: row.state,
			isTest: row.isTest,
			isDrill: row.isDrill,
			decision: row.decision,
			takenBy,
			streamNames: streams.filter((item) => item.id === row.id).map((item) => item.name),
			area90Deg2: areas.find((item) => item.id === row.id)?.area90Deg2 ?? null,
			detections: detections.find((item) => item.id === row.id)?.count ?? 0
		})),
		nextBefore: rows.length > limit ? page.at(-1)!.transient.t0.toISOString() : null
	};
}
