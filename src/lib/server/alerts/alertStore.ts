import { and, eq, inArray, or, sql } from 'drizzle-orm';
import type { AlertRole } from '../../domain/vocabulary';
import type { Shape } from '../../sky/regions/shape';
import type { Executor } from '../db/database';
import { alert, packet, stream, type Citation } from '../db/schema/alerts';
import { transient } from '../db/schema/transients';
import type { PacketRow } from '../packets/packetStore';
import { alertColumns, type AlertWithoutSky } from './alertSky';

export type AlertRow = AlertWithoutSky;

/** Any fixed number: alerts are put into transients one at a time, so that two can't both start one. */
const TRIAGE_LOCK = 732_018_335;

export async function lockTriage(tx: Executor): Promise<void> {
	await tx.execute(sql`select pg_advisory_xact_lock(${TRIAGE_LOCK})`);
}

/** The designation an alert belongs to now, and the body it was read from. */
export async function homeAndPacketOf(
	executor: Executor,
	{ transientId, rawId }: Pick<AlertRow, 'transientId' | 'rawId'>
): Promise<{ designation: string; packet: PacketRow }> {
	const [found] = await executor
		.select({ designation: transient.designation, packet })
		.from(transient)
		.innerJoin(packet, eq(packet.id, rawId))
		.where(eq(transient.id, transientId));
	return found!;
}

/** Every serial of one packet. */
export async function serialsOf(
	tx: Executor,
	streamId: string,
	packetId: string
): Promise<AlertRow[]> {
	return tx
		.select(alertColumns)
		.from(alert)
		.where(and(eq(alert.streamId, streamId), eq(alert.packetId, packetId)))
		.orderBy(alert.serial);
}

/** The alerts that the citations name, with the relation each is cited by. */
export async function citedAlerts(
	tx: Executor,
	cites: Citation[]
): Promise<{ alert: AlertRow; relation: Citation['relation'] }[]> {
	if (cites.length === 0) return [];
	const rows = await tx
		.select({ alert: alertColumns, code: stream.code })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(
			or(
				...cites.map((cite) =>
					and(
						cite.stream === null ? undefined : eq(stream.code, cite.stream),
						eq(alert.packetId, cite.packetId)
					)
				)
			)
		)
		.orderBy(alert.receivedAt);
	return rows.flatMap((row) => {
		const cite = cites.find(
			(item) =>
				(item.stream === null || item.stream === row.code) && item.packetId === row.alert.packetId
		);
		return cite ? [{ alert: row.alert, relation: cite.relation }] : [];
	});
}

/** Alerts that arrived earlier and cite this packet: an update or a retraction may overtake its report. */
export async function citingAlerts(
	tx: Executor,
	streamCode: string,
	packetId: string
): Promise<{ alert: AlertRow; relation: Citation['relation'] }[]> {
	const pattern = JSON.stringify([{ packetId }]);
	const rows = await tx
		.select(alertColumns)
		.from(alert)
		.where(sql`${alert.cites} @> ${pattern}::jsonb`)
		.orderBy(alert.receivedAt);
	return rows.flatMap((row) => {
		const cite = row.cites.find(
			(item) => (item.stream === null || item.stream === streamCode) && item.packetId === packetId
		);
		return cite ? [{ alert: row, relation: cite.relation }] : [];
	});
}

export async function withdrawAlerts(tx: Executor, ids: string[]): Promise<void> {
	if (ids.length > 0) await tx.update(alert).set({ live: false }).where(inArray(alert.id, ids));
}

export type LivePart = {
	alertId: string;
	t0: Date;
	shape: Shape;
	streamCode: string;
	alertsPerYear: number;
	coincidenceWindowS: number;
};

/** The live parts of one transient, in order of arrival. */
export async function liveParts(tx: Executor, transientId: string): Promise<LivePart[]> {
	const rows = await tx
		.select({ alert, stream })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(and(eq(alert.transientId, transientId), eq(alert.live, true)))
		.orderBy(alert.receivedAt, alert.id);
	return rows.flatMap(({ alert: row, stream: source }) =>
		row.shape
			? [
					{
						alertId: row.id,
						t0: row.t0,
						shape: row.shape,
						streamCode: source.code,
						alertsPerYear: source.alertsPerYear,
						coincidenceWindowS: source.coincidenceWindowS
					}
				]
			: []
	);
}

/** Open transients of the same role with T0 within `windowS` of the given one. */
export async function nearbyTransients(
	tx: Executor,
	role: AlertRole,
	t0: Date,
	windowS: number
): Promise<{ id: string; designation: string }[]> {
	return tx
		.select({ id: transient.id, designation: transient.designation })
		.from(transient)
		.where(
			and(
				eq(transient.state, 'open'),
				eq(transient.isTest, role === 'test'),
				eq(transient.isDrill, false),
				sql`${transient.t0} between ${new Date(t0.getTime() - windowS * 1000).toISOString()} and ${new Date(t0.getTime() + windowS * 1000).toISOString()}`
			)
		)
		.orderBy(transient.t0);
}
