import { and, eq, isNull, lt, or } from 'drizzle-orm';
import type { Executor } from '../db/database';
import { stream } from '../db/schema/alerts';

/**
 * Notes that a stream sent something that could be read, which ends its silence. A packet read again long
 * after it came is no news.
 */
export async function noteHeard(executor: Executor, streamId: string, at: Date): Promise<void> {
	await executor
		.update(stream)
		.set({ lastHeardAt: at, silenceNotedAt: null })
		.where(
			and(eq(stream.id, streamId), or(isNull(stream.lastHeardAt), lt(stream.lastHeardAt, at)))
		);
}
