import { and, asc, eq, inArray, isNull, sql, type SQL } from 'drizzle-orm';
import type { ObservationQuery } from '../../domain/observationQuery';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { telescope } from '../db/schema/network';
import { report, slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { requireTransient } from '../transients/transientStore';
import { executionStatus, type ExecutionStatus } from './executionStatus';

type TelescopeRow = typeof telescope.$inferSelect;
type SlotRow = typeof slot.$inferSelect;

/** One pointing of a slot; times are UTC. */
export type Observation = {
	obsId: string;
	designation: string;
	isDrill: boolean;
	isTest: boolean;
	telescope: Pick<TelescopeRow, 'name' | 'detectors'>;
	tile: SlotRow['tiles'][number];
	filter: string;
	status: ExecutionStatus;
	plannedAt: Date;
	start: Date;
	end: Date;
	/** As reported; null before. */
	exposureS: number | null;
};

/** How far back the list goes when neither a start nor a transient is asked for, days. */
const DEFAULT_PAST_DAYS = 30;

/** Every pointing of every slot that overlaps the span asked for, by start of the slot, then in the plan's order. */
export async function listObservations(
	app: App,
	actor: Actor | null,
	{ designation, from, to }: ObservationQuery
): Promise<Observation[]> {
	requirePermission(actor, 'viewSlots');
	requirePermission(actor, 'viewTransients');
	const { database } = app;
	const conditions: SQL[] = [];
	if (designation) {
		conditions.push(eq(slot.transientId, (await requireTransient(database, designation)).id));
	}
	const since =
		from ??
		(designation
			? undefined
			: new Date(app.now().getTime() - DEFAULT_PAST_DAYS * 86_400_000).toISOString());
	if (since) conditions.push(sql`upper(${slot.during}) > ${since}`);
	if (to) conditions.push(sql`lower(${slot.during}) < ${to}`);
	const rows = await database
		.select({
			slot,
			name: telescope.name,
			detectors: telescope.detectors,
			designation: transient.designation,
			isDrill: transient.isDrill,
			isTest: transient.isTest
		})
		.from(slot)
		.innerJoin(telescope, eq(telescope.id, slot.telescopeId))
		.innerJoin(transient, eq(transient.id, slot.transientId))
		.where(and(...conditions))
		.orderBy(asc(slot.during), asc(slot.id));
	const reports = await standingReports(
		app,
		rows.flatMap((row) => (row.slot.state === 'reported' ? [row.slot.id] : []))
	);
	return rows.flatMap(({ name, detectors, ...row }) => {
		const own = reports.filter(({ slotId }) => slotId === row.slot.id);
		return observationsOf({ ...row, telescope: { name, detectors } }, own);
	});
}

type StandingReport = Pick<
	typeof report.$inferSelect,
	'slotId' | 'kind' | 'observedAt' | 'exposureS'
>;

async function standingReports(app: App, slotIds: string[]): Promise<StandingReport[]> {
	if (slotIds.length === 0) return [];
	return app.database
		.select({
			slotId: report.slotId,
			kind: report.kind,
			observedAt: report.observedAt,
			exposureS: report.exposureS
		})
		.from(report)
		.where(and(inArray(report.slotId, slotIds), isNull(report.withdrawnAt)))
		.orderBy(asc(report.observedAt));
}

/**
 * One row a tile, at the planned times. Of a slot with one tile that was performed, the report's middle and exposure give
 * the times; a report on several tiles says nothing of each, so that these keep the plan's.
 */
function observationsOf(
	row: Pick<Observation, 'designation' | 'isDrill' | 'isTest' | 'telescope'> & { slot: SlotRow },
	reports: StandingReport[]
): Observation[] {
	const { slot: item, ...rest } = row;
	const status = executionStatus(item.state, {
		wasOnSky: item.onSkyAt !== null,
		reportKinds: reports.map(({ kind }) => kind)
	});
	const measured =
		status === 'Performed'
			? reports.find(
					({ kind, exposureS }) => kind !== 'weather' && kind !== 'technical' && exposureS
				)
			: undefined;
	const latest = [item.createdAt, item.claimedAt, item.onSkyAt, item.endedAt].reduce<Date>(
		(last, at) => (at && at > last ? at : last),
		item.createdAt
	);
	return item.tiles.map((tile, i) => {
		const exact = item.tiles.length === 1 ? measured : undefined;
		const halfMs = ((exact?.exposureS ?? 0) * 1000) / 2;
		const start = exact ? exact.observedAt.getTime() - halfMs : tile.startMs;
		const end = exact ? exact.observedAt.getTime() + halfMs : tile.startMs + tile.exposureS * 1000;
		return {
			...rest,
			obsId: `${item.id}-${i + 1}`,
			tile,
			filter: item.filter,
			status,
			plannedAt: latest,
			start: new Date(start),
			end: new Date(end),
			exposureS: measured?.exposureS ?? null
		};
	});
}
