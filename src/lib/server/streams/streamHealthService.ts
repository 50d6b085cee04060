import { asc, eq, sql } from 'drizzle-orm';
import { allows } from '../../domain/permissions';
import type { NetworkNotices, StreamDay, StreamHealth } from '../../domain/streamHealth';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { packet, stream } from '../db/schema/alerts';
import { DomainError } from '../domainError';
import { isSilent } from './silence';

const DAYS_SHOWN = 14;
const LAG_DAYS = 30;
const MINUTE_MS = 60_000;
const DAY_MS = 86_400_000;

/** How one stream fares: packets a day, their lag behind T0, and for how long it has been quiet. */
export async function streamHealth(
	app: App,
	actor: Actor | null,
	code: string
): Promise<StreamHealth> {
	requirePermission(actor, 'viewNetwork');
	const [row] = await app.database.select().from(stream).where(eq(stream.code, code));
	if (!row) throw new DomainError('notFound', `There is no stream ${code}.`);
	const now = app.now();
	const lagSince = new Date(+now - LAG_DAYS * DAY_MS).toISOString();
	// By hand is late by the caller's time, which says nothing of the stream.
	const { rows } = await app.database.execute<{ median: number | null; packets: number }>(sql`
		select percentile_cont(0.5) within group (
				order by extract(epoch from alert.received_at - alert.t0))::float8 as median,
			count(*)::int as packets
		from alert join packet on packet.id = alert.raw_id
		where alert.stream_id = ${row.id} and alert.role = 'observation' and alert.kind <> 'retraction'
			and alert.received_at > ${lagSince} and packet.person_id is null`);
	return {
		days: await daysOf(app, row.id, now),
		medianLagS: rows[0]!.median,
		lagPackets: rows[0]!.packets,
		quietMs: row.retiredAt ? null : +now - +(row.lastHeardAt ?? row.createdAt),
		silentAfterMs: row.silentAfterMinutes * MINUTE_MS
	};
}

async function daysOf(app: App, streamId: string, now: Date): Promise<StreamDay[]> {
	const today = Math.floor(+now / DAY_MS) * DAY_MS;
	const first = today - (DAYS_SHOWN - 1) * DAY_MS;
	const { rows } = await app.database.execute<StreamDay>(sql`
		select to_char(received_at at time zone 'UTC', 'YYYY-MM-DD') as day,
			(count(*) filter (where state in ('taken', 'copy', 'noted')))::int as packets,
			(count(*) filter (where state in ('refused', 'dismissed')))::int as errors
		from packet
		where stream_id = ${streamId} and received_at >= ${new Date(first).toISOString()}
		group by 1`);
	const byDay = new Map(rows.map((item) => [item.day, item]));
	return Array.from({ length: DAYS_SHOWN }, (_, i) => {
		const day = new Date(first + i * DAY_MS).toISOString().slice(0, 10);
		return byDay.get(day) ?? { day, packets: 0, errors: 0 };
	});
}

/** Streams that are silent for too long, and how much waits in quarantine. */
export async function networkNotices(app: App, actor: Actor | null): Promise<NetworkNotices> {
	requirePermission(actor, 'viewNetwork');
	const rows = await app.database
		.select({ code: stream.code, name: stream.name, lastHeardAt: stream.lastHeardAt })
		.from(stream)
		.where(isSilent(app.now()))
		.orderBy(asc(stream.name));
	return {
		silent: rows.map((row) => ({ ...row, lastHeardAt: row.lastHeardAt?.toISOString() ?? null })),
		quarantined: allows(actor.roles, 'editStreams')
			? await app.database.$count(packet, eq(packet.state, 'refused'))
			: null
	};
}
