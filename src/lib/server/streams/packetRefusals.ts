import { and, eq, lt } from 'drizzle-orm';
import type { App } from '../app';
import { packetRefusal } from '../db/schema/alerts';
import { DomainError } from '../domainError';
import type { AuthenticatedStream } from './streamKeyService';

const KEPT_DAYS = 30;
const DAY_MS = 86_400_000;
const LONGEST_DETAIL = 500;

/** Runs the taking-in of one packet; a refusal is noted for the stream's error rate and thrown on. */
export async function notingRefusals<T>(
	app: Pick<App, 'database' | 'now'>,
	{ streamId }: Pick<AuthenticatedStream, 'streamId'>,
	body: () => Promise<T>
): Promise<T> {
	try {
		return await body();
	} catch (error) {
		if (error instanceof DomainError) await noteRefusal(app, streamId, error);
		throw error;
	}
}

async function noteRefusal(
	app: Pick<App, 'database' | 'now'>,
	streamId: string,
	{ code, message, errors }: DomainError
): Promise<void> {
	const at = app.now();
	const fields = errors.map(({ pointer, detail }) => `${pointer} ${detail}`).join('; ');
	const detail = (fields || message).slice(0, LONGEST_DETAIL);
	await app.database.insert(packetRefusal).values({ streamId, at, code, detail });
	const before = new Date(+at - KEPT_DAYS * DAY_MS);
	await app.database
		.delete(packetRefusal)
		.where(and(eq(packetRefusal.streamId, streamId), lt(packetRefusal.at, before)));
}
