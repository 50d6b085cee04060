import { and, asc, eq, inArray, isNull, notInArray, sql } from 'drizzle-orm';
import type {
	BoardOutlook,
	BoardPart,
	BoardRegion,
	BoardReport,
	BoardSlot,
	BoardTransient
} from '../../domain/board';
import type { Outlook } from '../../sky/outlook/outlook';
import { alertColumns, type AlertWithoutSky } from '../alerts/alertSky';
import { shownShape } from '../alerts/shownShape';
import type { Executor } from '../db/database';
import { alert, stream } from '../db/schema/alerts';
import { report, slot } from '../db/schema/slots';
import { outlook, region } from '../db/schema/transients';
import { whyNot } from '../outlook/limitWords';
import {
	boardNames,
	personRef,
	type BoardNames,
	type Named,
	type TelescopeName
} from './boardNames';
import { headline } from './headline';
import type { TransientRow } from './transientStore';

/** Everything the board shows of these transients, in their order: one query a table. */
export async function boardTransients(
	executor: Executor,
	rows: TransientRow[],
	names?: BoardNames
): Promise<BoardTransient[]> {
	if (rows.length === 0) return [];
	const { personOf, telescopeOf } = names ?? (await boardNames(executor));
	const ids = rows.map((row) => row.id);
	// One after the other: on a transaction's single connection they can't overlap anyway.
	const parts = await executor
		.select({ alert: alertColumns, stream })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(and(inArray(alert.transientId, ids), eq(alert.live, true)))
		.orderBy(asc(alert.receivedAt), asc(alert.id));
	const regions = await latestRegions(executor, ids);
	const outlooks = await executor.select().from(outlook).where(inArray(outlook.transientId, ids));
	const slots = await executor
		.select()
		.from(slot)
		.where(and(inArray(slot.transientId, ids), notInArray(slot.state, ['lapsed', 'released'])))
		.orderBy(asc(slot.during));
	const reports = await executor
		.select()
		.from(report)
		.where(and(inArray(report.transientId, ids), isNull(report.withdrawnAt)))
		.orderBy(asc(report.observedAt));
	return rows.map((row) => {
		const own = parts.filter((item) => item.alert.transientId === row.id);
		const versions = regions.filter((item) => item.transientId === row.id);
		const stored = outlooks.find((item) => item.transientId === row.id);
		const ownReports = reports.filter((item) => item.transientId === row.id);
		return {
			designation: row.designation,
			revision: row.revision,
			state: row.state,
			isTest: row.isTest,
			isDrill: row.isDrill,
			t0: row.t0.toISOString(),
			firstReceivedAt: row.firstReceivedAt.toISOString(),
			headline: headline(
				versions[0]?.area90Deg2 ?? null,
				own.map((item) => ({
					streamClass: item.stream.streamClass,
					shapeKind: item.alert.shape?.kind
				})),
				ownReports.some((item) => item.kind === 'detection')
			),
			taken:
				row.takenBy && row.takenAt
					? { by: personRef(personOf(row.takenBy)), at: row.takenAt.toISOString() }
					: null,
			decision:
				row.decision && row.decidedBy && row.decidedAt
					? {
							decision: row.decision,
							by: personRef(personOf(row.decidedBy)),
							at: row.decidedAt.toISOString(),
							reason: row.decisionReason
						}
					: null,
			parts: own.flatMap(boardPart),
			region: boardRegion(versions),
			outlook: stored
				? boardOutlook(stored.body, stored.regionVersion, fadeOf(own), telescopeOf)
				: null,
			slots: slots
				.filter((item) => item.transientId === row.id)
				.map((item) => boardSlot(item, personOf, telescopeOf)),
			reports: ownReports.map((item) => boardReport(item, personOf, telescopeOf))
		};
	});
}

/** The two newest versions of each transient's region, newest first. */
async function latestRegions(executor: Executor, ids: string[]) {
	const columns = {
		transientId: region.transientId,
		version: region.version,
		cause: region.cause,
		method: region.method,
		raDeg: region.raDeg,
		decDeg: region.decDeg,
		sigmaDeg: region.sigmaDeg,
		area50Deg2: region.area50Deg2,
		area90Deg2: region.area90Deg2,
		equivalentRadiusDeg: region.equivalentRadiusDeg,
		logOddsAgreement: region.logOddsAgreement,
		notFoundCount: region.notFoundCount,
		tooFaintChance: region.tooFaintChance
	};
	const ranked = executor
		.select({
			...columns,
			place:
				sql<number>`row_number() over (partition by ${region.transientId} order by ${region.version} desc)`.as(
					'place'
				)
		})
		.from(region)
		.where(inArray(region.transientId, ids))
		.as('ranked');
	return executor
		.select()
		.from(ranked)
		.where(sql`${ranked.place} <= 2`)
		.orderBy(ranked.transientId, ranked.place);
}

type RegionVersion = Awaited<ReturnType<typeof latestRegions>>[number];

function boardRegion([latest, before]: RegionVersion[]): BoardRegion | null {
	if (!latest) return null;
	return {
		version: latest.version,
		method: latest.method,
		centre: { raDeg: latest.raDeg, decDeg: latest.decDeg },
		sigmaDeg: latest.sigmaDeg,
		area50Deg2: latest.area50Deg2,
		area90Deg2: latest.area90Deg2,
		equivalentRadiusDeg: latest.equivalentRadiusDeg,
		logOddsAgreement: latest.logOddsAgreement,
		before: before ? { area90Deg2: before.area90Deg2, cause: latest.cause } : null,
		searched:
			latest.tooFaintChance === null
				? null
				: { reports: latest.notFoundCount, tooFaintChance: latest.tooFaintChance }
	};
}

function boardPart(item: {
	alert: AlertWithoutSky;
	stream: typeof stream.$inferSelect;
}): BoardPart[] {
	if (!item.alert.shape) return [];
	return [
		{
			alertId: item.alert.id,
			packetId: item.alert.packetId,
			streamCode: item.stream.code,
			streamName: item.stream.name,
			streamClass: item.stream.streamClass,
			receivedAt: item.alert.receivedAt.toISOString(),
			membership: item.alert.membership,
			logOdds: item.alert.logOdds,
			shape: shownShape(item.alert.shape)
		}
	];
}

/** A hundredth of an arcsecond: a pointing loses nothing, the board's body gets shorter. */
const TILE_DECIMALS = 6;

function rounded(value: number, decimals: number): number {
	const scale = 10 ** decimals;
	return Math.round(value * scale) / scale;
}

/** The fade of the stream with the earliest live alert, as the outlook takes it. */
function fadeOf(
	live: { alert: AlertWithoutSky; stream: typeof stream.$inferSelect }[]
): BoardOutlook['fade'] {
	const first = [...live].sort((a, b) => +a.alert.t0 - +b.alert.t0)[0];
	return first ? { ...first.stream.fade, streamName: first.stream.name } : null;
}

function boardOutlook(
	body: Outlook,
	regionVersion: number,
	fade: BoardOutlook['fade'],
	telescopeOf: (id: string) => TelescopeName | undefined
): BoardOutlook {
	return {
		computedAt: new Date(body.computedMs).toISOString(),
		regionVersion,
		networkCatch: body.networkCatch,
		costOfWaitingPoints: body.costOfWaitingPoints,
		fade,
		order: body.networkOrder.flatMap((item) => telescopeOf(item.telescopeId)?.code ?? []),
		rows: body.rows.flatMap((row) => {
			const code = telescopeOf(row.telescopeId)?.code;
			if (!code) return [];
			return [
				{
					telescopeCode: code,
					catch: row.catch,
					reach: row.reach,
					opensAt: row.opensMs === null ? null : new Date(row.opensMs).toISOString(),
					windows: row.windows.map((window) => ({
						startAt: new Date(window.startMs).toISOString(),
						endAt: new Date(window.endMs).toISOString(),
						opensBy: window.opensBy,
						endsBy: window.endsBy
					})),
					whyNot: row.forbidden ? whyNot(row.forbidden) : null,
					forbidden: row.forbidden && {
						limit: row.forbidden.limit,
						missingDeg: row.forbidden.closestDeg,
						at: row.forbidden.atMs === null ? null : new Date(row.forbidden.atMs).toISOString()
					},
					atOpening: row.atOpening,
					tiles: row.plan.map((tile) => ({
						centre: {
							raDeg: rounded(tile.centre.raDeg, TILE_DECIMALS),
							decDeg: rounded(tile.centre.decDeg, TILE_DECIMALS)
						},
						rotationDeg: rounded(tile.rotationDeg, 3),
						startAt: new Date(tile.startMs).toISOString(),
						exposureS: tile.exposureS,
						probability: rounded(tile.probability, 5),
						detectChance: rounded(tile.detectChance, 4)
					})),
					strip: row.strip
				}
			];
		})
	};
}

export function boardSlot(
	item: typeof slot.$inferSelect,
	personOf: (id: string) => Named | undefined,
	telescopeOf: (id: string) => TelescopeName | undefined
): BoardSlot {
	return {
		id: item.id,
		telescopeCode: telescopeOf(item.telescopeId)?.code ?? '',
		startAt: item.during.start.toISOString(),
		endAt: item.during.end.toISOString(),
		state: item.state,
		filter: item.filter,
		exposureS: item.exposureS,
		catch: item.catch,
		claimedBy: item.claimedBy ? personRef(personOf(item.claimedBy)) : null,
		claimedAt: item.claimedAt?.toISOString() ?? null
	};
}

function boardReport(
	item: typeof report.$inferSelect,
	personOf: (id: string) => Named | undefined,
	telescopeOf: (id: string) => TelescopeName | undefined
): BoardReport {
	const scope = item.telescopeId ? telescopeOf(item.telescopeId) : undefined;
	return {
		id: item.id,
		telescopeCode: scope?.code ?? null,
		telescopeName: scope?.name ?? null,
		kind: item.kind,
		filter: item.filter,
		observedAt: item.observedAt.toISOString(),
		magnitude: item.magnitude,
		magnitudeError: item.magnitudeError,
		limitMag: item.limitMag,
		remarks: item.remarks,
		reportedBy: personRef(personOf(item.reportedBy))
	};
}
