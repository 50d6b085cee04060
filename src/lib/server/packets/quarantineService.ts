import { and, asc, count, desc, eq, lt, sql } from 'drizzle-orm';
import type { QuarantinedPacket } from '../../domain/quarantine';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { packet, stream } from '../db/schema/alerts';
import { DomainError } from '../domainError';
import { logger } from '../logger';
import { settlePacket, type PacketRow } from './packetStore';
import { judgePacket, type Intake } from './takeInService';

const SHOWN = 100;
const TEXT_SHOWN_BYTES = 64 * 1024;

/** The bodies that could not be read and that nobody has dealt with, newest first. */
export async function listQuarantine(
	app: App,
	actor: Actor | null
): Promise<{ packets: QuarantinedPacket[]; total: number }> {
	requirePermission(actor, 'editStreams');
	const refused = eq(packet.state, 'refused');
	const rows = await app.database
		.select({
			id: packet.id,
			streamCode: stream.code,
			streamName: stream.name,
			channel: packet.channel,
			contentType: packet.contentType,
			bodyBytes: sql<number>`octet_length(${packet.body})`,
			fileBytes: packet.fileBytes,
			receivedAt: packet.receivedAt,
			code: packet.code,
			reason: packet.detail,
			beginning: sql<Buffer>`substring(${packet.body} from 1 for ${sql.raw(String(TEXT_SHOWN_BYTES))})`
		})
		.from(packet)
		.innerJoin(stream, eq(stream.id, packet.streamId))
		.where(refused)
		.orderBy(desc(packet.receivedAt), desc(packet.id))
		.limit(SHOWN);
	const [total] = await app.database.select({ value: count() }).from(packet).where(refused);
	return {
		packets: rows.map(({ bodyBytes, fileBytes, beginning, ...row }) => ({
			...row,
			bytes: bodyBytes + (fileBytes ?? 0),
			receivedAt: row.receivedAt.toISOString(),
			code: row.code ?? '',
			text: beginning.toString('utf8')
		})),
		total: total!.value
	};
}

/**
 * Reads a quarantined body again, with its stream's settings as they are now. What still can't be read
 * stays where it is, with the new reason, which is thrown on.
 */
export async function replayPacket(app: App, actor: Actor | null, id: number): Promise<Intake> {
	requirePermission(actor, 'editStreams');
	const [found] = await app.database
		.select({ packet, stream })
		.from(packet)
		.innerJoin(stream, eq(stream.id, packet.streamId))
		.where(eq(packet.id, id));
	if (!found) throw new DomainError('notFound', 'There is no such packet.');
	if (found.packet.state !== 'refused') {
		throw new DomainError('wrongState', 'This packet is not in quarantine any more.');
	}
	return judgePacket(app, found.stream, found.packet, actor.name);
}

/** Takes a body off the list; it is kept all the same. */
export async function dismissPacket(app: App, actor: Actor | null, id: number): Promise<void> {
	requirePermission(actor, 'editStreams');
	const [found] = await app.database.select().from(packet).where(eq(packet.id, id));
	if (!found) throw new DomainError('notFound', 'There is no such packet.');
	if (found.state === 'dismissed') return;
	const { code, detail } = found;
	const outcome = { state: 'dismissed' as const, at: app.now(), code, detail };
	if (found.state !== 'refused' || !(await settlePacket(app.database, id, outcome))) {
		throw new DomainError('wrongState', 'This packet is not in quarantine any more.');
	}
}

/** A body that is kept but was not judged within this time lost its process on the way. */
const UNJUDGED_AFTER_S = 60;
const RESUMED_AT_ONCE = 50;
/** One that fails for this long, and not because of what it says, goes to the quarantine list all the same. */
const GIVEN_UP_AFTER_S = 3600;

/** Judges what was kept by a process that ended before it had judged it. */
export async function resumePackets(app: App): Promise<number> {
	const before = new Date(app.now().getTime() - UNJUDGED_AFTER_S * 1000);
	const rows = await app.database
		.select({ packet, stream })
		.from(packet)
		.innerJoin(stream, eq(stream.id, packet.streamId))
		.where(and(eq(packet.state, 'received'), lt(packet.receivedAt, before)))
		.orderBy(asc(packet.receivedAt))
		.limit(RESUMED_AT_ONCE);
	for (const row of rows) {
		try {
			await judgePacket(app, row.stream, row.packet);
		} catch (error) {
			// A refusal is its outcome, and it is noted.
			if (!(error instanceof DomainError)) await giveUpLater(app, row.packet, error as Error);
		}
	}
	return rows.length;
}

/** A body that a fault of ours keeps from being judged must not hold up those behind it. */
async function giveUpLater(app: App, kept: PacketRow, { message }: Error): Promise<void> {
	logger.error({ packet: kept.id, error: message }, 'a packet could not be judged');
	if (+app.now() - +kept.receivedAt < GIVEN_UP_AFTER_S * 1000) return;
	await settlePacket(app.database, kept.id, {
		state: 'refused',
		at: app.now(),
		code: 'unavailable',
		detail: 'Duskline failed over it; the log says how. Read it again once that is mended.'
	});
}
