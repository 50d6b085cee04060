import { createHash } from 'node:crypto';
import { and, eq, inArray } from 'drizzle-orm';
import type { PacketChannel, PacketState } from '../../domain/vocabulary';
import type { Executor } from '../db/database';
import { packet } from '../db/schema/alerts';
import type { DomainError } from '../domainError';

export type PacketRow = typeof packet.$inferSelect;

export type ReceivedPacket = {
	body: Buffer;
	contentType: string;
	channel: PacketChannel;
	keyId?: string | null;
	personId?: string | null;
	file?: { key: string; name: string; bytes: number; sha256: string } | null;
};

const LONGEST_DETAIL = 1000;

/** Keeps a body as received; committed by itself, before anybody looks at what it says. */
export async function keepPacket(
	executor: Executor,
	streamId: string,
	received: ReceivedPacket,
	receivedAt: Date
): Promise<PacketRow> {
	const { body, contentType, channel, keyId = null, personId = null, file = null } = received;
	const [row] = await executor
		.insert(packet)
		.values({
			streamId,
			keyId,
			personId,
			channel,
			contentType,
			body,
			fileKey: file?.key ?? null,
			fileName: file?.name ?? null,
			fileBytes: file?.bytes ?? null,
			sha256: sha256Of(body, file?.sha256),
			receivedAt
		})
		.returning();
	return row!;
}

/** Notes what became of a body that was not settled yet; false when somebody else did so meanwhile. */
export async function settlePacket(
	executor: Executor,
	id: number,
	outcome: { state: PacketState; at: Date; code?: string | null; detail?: string }
): Promise<boolean> {
	const { state, at, code = null, detail = '' } = outcome;
	const rows = await executor
		.update(packet)
		.set({ state, judgedAt: at, code, detail: storable(detail).slice(0, LONGEST_DETAIL) })
		.where(and(eq(packet.id, id), inArray(packet.state, ['received', 'refused'])))
		.returning({ id: packet.id });
	return rows.length > 0;
}

/** A refusal in one line: the fields that are wrong, or the sentence. */
export function refusalText({ message, errors }: DomainError): string {
	return errors.map(({ pointer, detail }) => `${pointer} ${detail}`).join('; ') || message;
}

/** PostgreSQL has no NUL in texts, and a refusal may quote one. */
function storable(text: string): string {
	return text.replaceAll('\u0000', '\ufffd');
}

function sha256Of(body: Buffer, fileSha256 = ''): string {
	return createHash('sha256').update(body).update(fileSha256).digest('hex');
}
