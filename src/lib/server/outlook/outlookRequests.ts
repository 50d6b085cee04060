import { eq } from 'drizzle-orm';
import type { App } from '../app';
import type { Executor } from '../db/database';
import { transient } from '../db/schema/transients';
import { refreshOutlookJob } from './refreshOutlookJob';

/** Asks for a transient's outlook, in the transaction that made it necessary. */
export async function requestOutlook(app: App, tx: Executor, transientId: string): Promise<void> {
	await app.queue.enqueue(tx, refreshOutlookJob, { transientId }, { singletonKey: transientId });
}

/** Asks for the outlook of every open transient. */
export async function requestAllOutlooks(app: App): Promise<void> {
	const open = await app.database
		.select({ id: transient.id })
		.from(transient)
		.where(eq(transient.state, 'open'));
	for (const { id } of open) await requestOutlook(app, app.database, id);
}
