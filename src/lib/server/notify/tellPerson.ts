import { eq } from 'drizzle-orm';
import { z } from 'zod';
import type { App } from '../app';
import { readPushTargets, markPushSent, removePushTarget } from '../circulars/deliveryStore';
import type { Executor } from '../db/database';
import { person } from '../db/schema/people';
import type { Job } from '../jobs/queue';
import { mailer } from './mailer';
import { pusher } from './pusher';

const messageSchema = z.strictObject({
	personId: z.uuid(),
	subject: z.string().max(200),
	/** Paragraphs; nothing that may not stand on a locked screen goes into the first. */
	paragraphs: z.array(z.string().max(1000)).min(1).max(10),
	/** Where a tap or the link leads, within the application. */
	path: z.string().startsWith('/').max(300),
	/** The same for every try of one message; a later push with it takes the earlier one's place. */
	key: z.string().max(100)
});

export type PersonMessage = z.output<typeof messageSchema>;

/** After this long an undelivered push message has lost its worth. */
const PUSH_TTL_S = 3600;

/** Tells one of the team something by mail and on their devices, in the transaction that made it true. */
export async function tellPerson(app: App, tx: Executor, message: PersonMessage): Promise<void> {
	await app.queue.enqueue(tx, mailPersonJob, message);
	if (app.config.vapid) await app.queue.enqueue(tx, pushPersonJob, message);
}

/** Mails a message to one person; somebody who was disabled meanwhile gets none. */
export const mailPersonJob: Job<PersonMessage> = {
	name: 'notify.mail',
	payload: messageSchema,
	retryLimit: 8,
	concurrency: 2,
	handle: async (app, { personId, subject, paragraphs, path, key }) => {
		const [row] = await app.database.select().from(person).where(eq(person.id, personId));
		if (!row || row.disabledAt) return;
		await mailer(app.config).send({
			to: row.email,
			subject,
			text: [`Hello ${row.name},`, ...paragraphs, `${app.config.origin}${path}`].join('\n\n'),
			messageId: `${key}.${personId}@${new URL(app.config.origin).hostname}`
		});
	}
};

/** Sends a message to each of a person's devices once; those that are gone are forgotten. */
export const pushPersonJob: Job<PersonMessage> = {
	name: 'notify.push',
	payload: messageSchema,
	retryLimit: 3,
	concurrency: 2,
	handle: async (app, { personId, subject, paragraphs, path, key }) => {
		const sender = pusher(app.config);
		if (!sender) return;
		const errors: string[] = [];
		let accepted = 0;
		for (const device of await readPushTargets(app.database, personId)) {
			const outcome = await sender.send(
				device,
				{ title: subject, body: paragraphs[0]!, url: path, tag: key },
				{ ttlS: PUSH_TTL_S, topicOf: key }
			);
			if (outcome.kind === 'accepted') {
				accepted++;
				await markPushSent(app.database, device.id, app.now());
			} else if (outcome.kind === 'gone') {
				await removePushTarget(app.database, device.id);
			} else errors.push(outcome.error);
		}
		// One device that took it is enough: trying again would ring the others twice.
		if (accepted === 0 && errors.length > 0) throw new Error(errors.join('; '));
	}
};
