import { asc, desc, eq } from 'drizzle-orm';
import type { BoardTelescope, BoardTransient, PersonRef } from '../../domain/board';
import type { AlertKind, AlertRole, JournalKind, Membership } from '../../domain/vocabulary';
import type { Equatorial } from '../../sky/angle';
import type { Shape } from '../../sky/regions/shape';
import type { JointRegion } from '../../sky/regions/jointRegion';
import { requirePermission, type Actor } from '../actor';
import { alertColumns } from '../alerts/alertSky';
import { shownShape } from '../alerts/shownShape';
import type { App } from '../app';
import { alert, packet, stream } from '../db/schema/alerts';
import { circular } from '../db/schema/circulars';
import { person } from '../db/schema/people';
import { journal, region } from '../db/schema/transients';
import { boardFor } from './board';
import { personRef } from './boardNames';
import { boardTransients } from './boardRows';
import { requireTransient } from './transientStore';

export type RegionVersion = {
	version: number;
	computedAt: string;
	cause: string;
	alertCount: number;
	method: JointRegion['method'];
	centre: Equatorial;
	area50Deg2: number;
	area90Deg2: number;
	logOddsAgreement: number | null;
};

export type AlertAsReceived = {
	id: string;
	packetId: string;
	serial: number;
	streamCode: string;
	streamName: string;
	role: AlertRole;
	kind: AlertKind;
	t0: string;
	receivedAt: string;
	live: boolean;
	membership: Membership;
	logOdds: number | null;
	shape: Shape | null;
	significance: number | null;
	falseAlarmPerYear: number | null;
	remarks: string;
	/** The packet as received. */
	body: string;
	contentType: string;
};

export type JournalLine = {
	id: number;
	at: string;
	kind: JournalKind;
	summary: string;
	actor: PersonRef | null;
};

export type TransientDetail = {
	transient: BoardTransient;
	telescopes: BoardTelescope[];
	regions: RegionVersion[];
	alerts: AlertAsReceived[];
	journal: JournalLine[];
	circulars: { number: number; title: string; publishedAt: string }[];
};

/** Everything about one transient. */
export async function transientDetail(
	app: App,
	actor: Actor | null,
	designation: string
): Promise<TransientDetail> {
	requirePermission(actor, 'viewTransients');
	const { database } = app;
	const row = await requireTransient(database, designation);
	const [shown] = await boardTransients(database, [row]);
	const regions = await database
		.select()
		.from(region)
		.where(eq(region.transientId, row.id))
		.orderBy(asc(region.version));
	const alerts = await database
		.select({ alert: alertColumns, stream, packet })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.innerJoin(packet, eq(packet.id, alert.rawId))
		.where(eq(alert.transientId, row.id))
		.orderBy(asc(alert.receivedAt));
	const lines = await database
		.select({ journal, person })
		.from(journal)
		.leftJoin(person, eq(person.id, journal.actorId))
		.where(eq(journal.transientId, row.id))
		.orderBy(desc(journal.at), desc(journal.id));
	const published = await database
		.select()
		.from(circular)
		.where(eq(circular.transientId, row.id))
		.orderBy(asc(circular.number));
	return {
		transient: shown!,
		telescopes: (await boardFor(app, actor)).telescopes,
		regions: regions.map((item) => ({
			version: item.version,
			computedAt: item.computedAt.toISOString(),
			cause: item.cause,
			alertCount: item.alertCount,
			method: item.method,
			centre: { raDeg: item.raDeg, decDeg: item.decDeg },
			area50Deg2: item.area50Deg2,
			area90Deg2: item.area90Deg2,
			logOddsAgreement: item.logOddsAgreement
		})),
		alerts: alerts.map((item) => ({
			id: item.alert.id,
			packetId: item.alert.packetId,
			serial: item.alert.serial,
			streamCode: item.stream.code,
			streamName: item.stream.name,
			role: item.alert.role,
			kind: item.alert.kind,
			t0: item.alert.t0.toISOString(),
			receivedAt: item.alert.receivedAt.toISOString(),
			live: item.alert.live,
			membership: item.alert.membership,
			logOdds: item.alert.logOdds,
			shape: item.alert.shape && shownShape(item.alert.shape),
			significance: item.alert.significance,
			falseAlarmPerYear: item.alert.falseAlarmPerYear,
			remarks: item.alert.remarks,
			body: item.packet.body.toString('utf8'),
			contentType: item.packet.contentType
		})),
		journal: lines.map((item) => ({
			id: item.journal.id,
			at: item.journal.at.toISOString(),
			kind: item.journal.kind,
			summary: item.journal.summary,
			actor: item.person ? personRef(item.person) : null
		})),
		circulars: published.flatMap((item) =>
			item.number !== null && item.publishedAt
				? [{ number: item.number, title: item.title, publishedAt: item.publishedAt.toISOString() }]
				: []
		)
	};
}
