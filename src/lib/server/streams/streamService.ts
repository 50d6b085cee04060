import { and, asc, desc, eq, inArray, isNull, sql } from 'drizzle-orm';
import type {
	StreamCreate,
	StreamDetail,
	StreamEdit,
	StreamKeyView,
	StreamOverview
} from '../../domain/stream';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { databaseErrorOf, type Executor } from '../db/database';
import { packet, stream, streamKey } from '../db/schema/alerts';
import { person } from '../db/schema/people';
import { transient } from '../db/schema/transients';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { refreshOutlooksJob } from '../outlook/refreshOutlooksJob';

type StreamRow = typeof stream.$inferSelect;

const MINUTE_MS = 60_000;
const DAY_MS = 86_400_000;
const REFUSALS_SHOWN = 10;

/** Every stream with what it sent in the last day, those in service first. */
export async function listStreams(app: App, actor: Actor | null): Promise<StreamOverview[]> {
	requirePermission(actor, 'viewNetwork');
	const rows = await app.database
		.select()
		.from(stream)
		.orderBy(sql`${stream.retiredAt} is not null`, asc(stream.name));
	return Promise.all(rows.map((row) => overviewOf(app, row)));
}

/** One stream with its settings, keys and latest refusals. */
export async function streamDetail(
	app: App,
	actor: Actor | null,
	code: string
): Promise<StreamDetail> {
	requirePermission(actor, 'viewNetwork');
	const row = await requireStream(app.database, code);
	const refusals = await app.database
		.select({ at: packet.receivedAt, code: packet.code, detail: packet.detail })
		.from(packet)
		.where(and(eq(packet.streamId, row.id), inArray(packet.state, ['refused', 'dismissed'])))
		.orderBy(desc(packet.receivedAt))
		.limit(REFUSALS_SHOWN);
	return {
		...(await overviewOf(app, row)),
		settings: settingsOf(row),
		keys: await keysOf(app.database, row.id),
		refusals: refusals.map(({ at, code, detail }) => ({
			at: at.toISOString(),
			code: code ?? '',
			detail
		}))
	};
}

/** Adds a stream; it can send as soon as it has a key. */
export async function createStream(
	app: App,
	actor: Actor | null,
	{ code, ...input }: StreamCreate
): Promise<{ code: string }> {
	requirePermission(actor, 'editStreams');
	try {
		return await writeTransaction(app, async (tx, change) => {
			await tx.insert(stream).values({ code, ...columnsOf(input), createdAt: app.now() });
			change.touchNetwork();
			return { code };
		});
	} catch (error) {
		if (databaseErrorOf(error)?.code !== '23505') throw error;
		const detail = `The code ${code} is in use.`;
		throw new DomainError('nameTaken', detail, [{ pointer: '/code', detail }]);
	}
}

/** Changes a stream's settings. What it has sent keeps the regions made from it; outlooks follow the new fade. */
export async function editStream(
	app: App,
	actor: Actor | null,
	code: string,
	input: StreamEdit
): Promise<void> {
	requirePermission(actor, 'editStreams');
	await writeTransaction(app, async (tx, change) => {
		const row = await requireStream(tx, code);
		await tx.update(stream).set(columnsOf(input)).where(eq(stream.id, row.id));
		// What the board says of every open transient may name the stream.
		const open = await tx
			.select({ id: transient.id })
			.from(transient)
			.where(eq(transient.state, 'open'));
		for (const { id } of open) change.touch(id);
		change.touchNetwork();
		await app.queue.enqueue(tx, refreshOutlooksJob, { reason: `stream ${code} was changed` });
	});
}

/** Takes a stream out of service, or back into it; its keys are refused meanwhile. */
export async function retireStream(
	app: App,
	actor: Actor | null,
	code: string,
	retired: boolean
): Promise<void> {
	requirePermission(actor, 'editStreams');
	await writeTransaction(app, async (tx, change) => {
		const row = await requireStream(tx, code);
		if ((row.retiredAt !== null) === retired) return;
		await tx
			.update(stream)
			.set({ retiredAt: retired ? app.now() : null })
			.where(eq(stream.id, row.id));
		change.touchNetwork();
	});
}

async function requireStream(executor: Executor, code: string): Promise<StreamRow> {
	const [row] = await executor.select().from(stream).where(eq(stream.code, code));
	if (!row) throw new DomainError('notFound', `There is no stream ${code}.`);
	return row;
}

async function overviewOf(app: App, row: StreamRow): Promise<StreamOverview> {
	const now = app.now();
	const since = new Date(+now - DAY_MS).toISOString();
	const { rows } = await app.database.execute<{
		packets: number;
		refused: number;
		live: number;
	}>(sql`select
		(select count(*)::int from packet where stream_id = ${row.id} and received_at > ${since}
			and state in ('taken', 'copy', 'noted')) as packets,
		(select count(*)::int from packet where stream_id = ${row.id} and received_at > ${since}
			and state in ('refused', 'dismissed')) as refused,
		(select count(*)::int from stream_key where stream_id = ${row.id} and revoked_at is null) as live`);
	const { packets, refused, live } = rows[0]!;
	const quietSince = row.lastHeardAt ?? row.createdAt;
	return {
		code: row.code,
		name: row.name,
		streamClass: row.streamClass,
		lastHeardAt: row.lastHeardAt?.toISOString() ?? null,
		silent: !row.retiredAt && +now - +quietSince > row.silentAfterMinutes * MINUTE_MS,
		retired: row.retiredAt !== null,
		packets24h: packets,
		refused24h: refused,
		liveKeys: live
	};
}

async function keysOf(executor: Executor, streamId: string): Promise<StreamKeyView[]> {
	const rows = await executor
		.select({ key: streamKey, createdBy: person.name })
		.from(streamKey)
		.leftJoin(person, eq(person.id, streamKey.createdBy))
		.where(eq(streamKey.streamId, streamId))
		.orderBy(desc(isNull(streamKey.revokedAt)), desc(streamKey.createdAt));
	return rows.map(({ key, createdBy }) => ({
		id: key.id,
		label: key.label,
		prefix: key.prefix,
		createdAt: key.createdAt.toISOString(),
		createdBy,
		lastUsedAt: key.lastUsedAt?.toISOString() ?? null,
		revokedAt: key.revokedAt?.toISOString() ?? null
	}));
}

function settingsOf({ fade, ...row }: StreamRow): StreamEdit {
	return {
		name: row.name,
		streamClass: row.streamClass,
		defaultContainment: row.defaultContainment,
		defaultSystematicDeg: row.defaultSystematicDeg,
		alertsPerYear: row.alertsPerYear,
		coincidenceWindowS: row.coincidenceWindowS,
		silentAfterMinutes: row.silentAfterMinutes,
		fadeM1Mean: fade.m1Mean,
		fadeM1Spread: fade.m1Spread,
		fadeAlpha: fade.alpha,
		paramMap: row.paramMap
	};
}

function columnsOf({ fadeM1Mean, fadeM1Spread, fadeAlpha, ...input }: StreamEdit) {
	return { ...input, fade: { m1Mean: fadeM1Mean, m1Spread: fadeM1Spread, alpha: fadeAlpha } };
}
