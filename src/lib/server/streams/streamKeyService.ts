import { createHash, randomBytes } from 'node:crypto';
import { and, eq, isNull, lt, or } from 'drizzle-orm';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { stream, streamKey } from '../db/schema/alerts';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';

/** The stream behind an API key, with its settings. */
export type AuthenticatedStream = {
	streamId: string;
	keyId: string | null;
	stream: typeof stream.$inferSelect;
};

const PREFIX_LENGTH = 16;
const SECRET_BYTES = 24;
/** `lastUsedAt` is written no more often than this: a busy stream must not rewrite its key's row. */
const LAST_USED_STEP_MS = 60_000;
const KEY_FORM = /^dsk_[a-z][a-z0-9-]{1,30}_[A-Za-z0-9_-]{32}$/;

/** SHA-256 of a key, hexadecimal. A key holds 192 random bits, so no slow hash is needed. */
export function hashStreamKey(key: string): string {
	return createHash('sha256').update(key).digest('hex');
}

/** Makes a key for a stream: the key itself (shown once) and what is kept of it. */
export function makeStreamKey(streamCode: string): { key: string; prefix: string; hash: string } {
	const key = `dsk_${streamCode}_${randomBytes(SECRET_BYTES).toString('base64url')}`;
	return { key, prefix: key.slice(0, PREFIX_LENGTH), hash: hashStreamKey(key) };
}

/**
 * The stream that an `Authorization: Bearer dsk_…` header belongs to; throws `notSignedIn` when there
 * is none, it is unknown or it is revoked, and `notAllowed` when the stream is retired. The lookup is by
 * hash, so its time says nothing about how much of a guessed key is right.
 */
export async function authenticateStreamKey(
	app: Pick<App, 'database' | 'now'>,
	authorizationHeader: string | null | undefined
): Promise<AuthenticatedStream> {
	const key = /^Bearer +(\S+)$/i.exec((authorizationHeader ?? '').trim())?.[1];
	if (!key) {
		throw new DomainError(
			'notSignedIn',
			'Send the stream’s key in the header “Authorization: Bearer dsk_…”.'
		);
	}
	const unknown = new DomainError('notSignedIn', 'This key is not known, or it has been revoked.');
	if (!KEY_FORM.test(key)) throw unknown;
	const [found] = await app.database
		.select({ key: streamKey, stream })
		.from(streamKey)
		.innerJoin(stream, eq(stream.id, streamKey.streamId))
		.where(and(eq(streamKey.hash, hashStreamKey(key)), isNull(streamKey.revokedAt)));
	if (!found) throw unknown;
	if (found.stream.retiredAt) throw new DomainError('notAllowed', 'This stream is retired.');

	const now = app.now();
	if (!found.key.lastUsedAt || +now - +found.key.lastUsedAt >= LAST_USED_STEP_MS) {
		const before = new Date(+now - LAST_USED_STEP_MS);
		await app.database
			.update(streamKey)
			.set({ lastUsedAt: now })
			.where(
				and(
					eq(streamKey.id, found.key.id),
					or(isNull(streamKey.lastUsedAt), lt(streamKey.lastUsedAt, before))
				)
			);
	}
	return { streamId: found.stream.id, keyId: found.key.id, stream: found.stream };
}

/** Makes a key for a stream. The key is in the answer and nowhere else: it can't be shown again. */
export async function createStreamKey(
	app: App,
	actor: Actor | null,
	input: { streamCode: string; label: string }
): Promise<{ id: string; key: string; prefix: string }> {
	requirePermission(actor, 'editStreams');
	return writeTransaction(app, async (tx, change) => {
		const [owner] = await tx
			.select({ id: stream.id, code: stream.code, retiredAt: stream.retiredAt })
			.from(stream)
			.where(eq(stream.code, input.streamCode));
		if (!owner) throw new DomainError('notFound', 'There is no such stream.');
		if (owner.retiredAt) throw new DomainError('wrongState', 'This stream is retired.');
		const { key, prefix, hash } = makeStreamKey(owner.code);
		const [row] = await tx
			.insert(streamKey)
			.values({
				streamId: owner.id,
				label: input.label,
				prefix,
				hash,
				createdBy: actor.id,
				createdAt: app.now()
			})
			.returning({ id: streamKey.id });
		change.touchNetwork();
		return { id: row!.id, key, prefix };
	});
}

/** Ends a key at once; revoking twice changes nothing. */
export async function revokeStreamKey(
	app: App,
	actor: Actor | null,
	input: { keyId: string }
): Promise<void> {
	requirePermission(actor, 'editStreams');
	await writeTransaction(app, async (tx, change) => {
		const [found] = await tx
			.select({ revokedAt: streamKey.revokedAt })
			.from(streamKey)
			.where(eq(streamKey.id, input.keyId))
			.for('update');
		if (!found) throw new DomainError('notFound', 'There is no such key.');
		if (found.revokedAt) return;
		await tx.update(streamKey).set({ revokedAt: app.now() }).where(eq(streamKey.id, input.keyId));
		change.touchNetwork();
	});
}
