import { and, asc, desc, eq, gt, inArray, isNull, sql } from 'drizzle-orm';
import type { ReportKind } from '../../domain/vocabulary';
import type { Equatorial } from '../../sky/angle';
import type { Shape } from '../../sky/regions/shape';
import type { Executor } from '../db/database';
import { alert, stream } from '../db/schema/alerts';
import { telescope } from '../db/schema/network';
import { person } from '../db/schema/people';
import { report, slot } from '../db/schema/slots';
import { region, type transient } from '../db/schema/transients';
import { telescopeInWords } from './plainWords';

export type RecordedAlert = {
	streamName: string;
	packetId: string;
	receivedAt: Date;
	shape: Shape | null;
	significance: number | null;
	live: boolean;
};

export type RecordedReport = {
	kind: Extract<ReportKind, 'detection' | 'limit'>;
	/** Telescope and site, or the partner who sent it. */
	observerText: string;
	filter: string | null;
	observedAt: Date;
	exposureS: number | null;
	magnitude: number | null;
	magnitudeError: number | null;
	limitMag: number | null;
	position: Equatorial | null;
};

/** What a circular is written from. */
export type CircularRecord = {
	designation: string;
	t0: Date;
	now: Date;
	retracted: boolean;
	alerts: RecordedAlert[];
	region: {
		centre: Equatorial;
		alertCount: number;
		area50Deg2: number;
		area90Deg2: number;
		equivalentRadiusDeg: number;
		logOddsAgreement: number | null;
	} | null;
	/** Detections and limits, oldest first. */
	reports: RecordedReport[];
	/** Slots that are claimed or on sky and not over, earliest first. */
	next: { telescopeText: string; startAt: Date; endAt: Date; filter: string }[];
	author: { name: string; organisation: string; email: string };
};

/** Gathers it for one transient. */
export async function readCircularRecord(
	executor: Executor,
	subject: typeof transient.$inferSelect,
	authorId: string,
	now: Date
): Promise<CircularRecord> {
	const id = subject.id;
	return {
		designation: subject.designation,
		t0: subject.t0,
		now,
		retracted: subject.state === 'retracted',
		alerts: await readAlerts(executor, id),
		region: await readRegion(executor, id),
		reports: await readReports(executor, id),
		next: await readNext(executor, id, now),
		author: await readAuthor(executor, authorId)
	};
}

function readAlerts(executor: Executor, transientId: string): Promise<RecordedAlert[]> {
	return executor
		.select({
			streamName: stream.name,
			packetId: alert.packetId,
			receivedAt: alert.receivedAt,
			shape: alert.shape,
			significance: alert.significance,
			live: alert.live
		})
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(and(eq(alert.transientId, transientId), inArray(alert.kind, ['report', 'update'])))
		.orderBy(asc(alert.receivedAt), asc(alert.packetId));
}

async function readRegion(
	executor: Executor,
	transientId: string
): Promise<CircularRecord['region']> {
	const [row] = await executor
		.select({
			raDeg: region.raDeg,
			decDeg: region.decDeg,
			alertCount: region.alertCount,
			area50Deg2: region.area50Deg2,
			area90Deg2: region.area90Deg2,
			equivalentRadiusDeg: region.equivalentRadiusDeg,
			logOddsAgreement: region.logOddsAgreement
		})
		.from(region)
		.where(eq(region.transientId, transientId))
		.orderBy(desc(region.version))
		.limit(1);
	if (!row) return null;
	const { raDeg, decDeg, ...rest } = row;
	return { centre: { raDeg, decDeg }, ...rest };
}

async function readReports(executor: Executor, transientId: string): Promise<RecordedReport[]> {
	const rows = await executor
		.select({
			kind: report.kind,
			telescopeName: telescope.name,
			apertureM: telescope.apertureM,
			reporter: person.name,
			organisation: person.organisation,
			filter: report.filter,
			observedAt: report.observedAt,
			exposureS: report.exposureS,
			magnitude: report.magnitude,
			magnitudeError: report.magnitudeError,
			limitMag: report.limitMag,
			raDeg: report.raDeg,
			decDeg: report.decDeg
		})
		.from(report)
		.leftJoin(telescope, eq(telescope.id, report.telescopeId))
		.innerJoin(person, eq(person.id, report.reportedBy))
		.where(
			and(
				eq(report.transientId, transientId),
				inArray(report.kind, ['detection', 'limit']),
				isNull(report.withdrawnAt)
			)
		)
		.orderBy(asc(report.observedAt));
	return rows.map((row) => ({
		kind: row.kind === 'detection' ? 'detection' : 'limit',
		observerText:
			row.telescopeName === null
				? `reported by ${[row.reporter, row.organisation].filter(Boolean).join(', ')}`
				: telescopeInWords(row.telescopeName, row.apertureM),
		filter: row.filter,
		observedAt: row.observedAt,
		exposureS: row.exposureS,
		magnitude: row.magnitude,
		magnitudeError: row.magnitudeError,
		limitMag: row.limitMag,
		position:
			row.raDeg === null || row.decDeg === null ? null : { raDeg: row.raDeg, decDeg: row.decDeg }
	}));
}

async function readNext(
	executor: Executor,
	transientId: string,
	now: Date
): Promise<CircularRecord['next']> {
	const rows = await executor
		.select({
			name: telescope.name,
			apertureM: telescope.apertureM,
			during: slot.during,
			filter: slot.filter
		})
		.from(slot)
		.innerJoin(telescope, eq(telescope.id, slot.telescopeId))
		.where(
			and(
				eq(slot.transientId, transientId),
				inArray(slot.state, ['claimed', 'on sky']),
				gt(sql`upper(${slot.during})`, now)
			)
		)
		.orderBy(asc(sql`lower(${slot.during})`));
	return rows.map((row) => ({
		telescopeText: telescopeInWords(row.name, row.apertureM),
		startAt: row.during.start,
		endAt: row.during.end,
		filter: row.filter
	}));
}

async function readAuthor(executor: Executor, authorId: string): Promise<CircularRecord['author']> {
	const [row] = await executor
		.select({ name: person.name, organisation: person.organisation, email: person.email })
		.from(person)
		.where(eq(person.id, authorId));
	return row!;
}
