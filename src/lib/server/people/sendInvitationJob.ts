import { eq } from 'drizzle-orm';
import { z } from 'zod';
import type { Job } from '../jobs/queue';
import { person } from '../db/schema/people';
import { mailer } from '../notify/mailer';
import { invitationMail } from './invitationMail';

/** Mails an invitation; somebody who was disabled or has joined meanwhile gets none. */
export const sendInvitationJob: Job<{ personId: string; invitedBy: string }> = {
	name: 'people.sendInvitation',
	payload: z.strictObject({ personId: z.uuid(), invitedBy: z.string() }),
	retryLimit: 8,
	concurrency: 1,
	handle: async (app, { personId, invitedBy }) => {
		const [row] = await app.database.select().from(person).where(eq(person.id, personId));
		if (!row || row.disabledAt || row.joinedAt) return;
		const { email: to, name, roles, invitedAt } = row;
		const invitation = { personId, to, name, roles, invitedBy, invitedAtMs: +invitedAt };
		await mailer(app.config).send(invitationMail(invitation, app.config.origin));
	}
};
