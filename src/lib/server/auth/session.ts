import { randomBytes } from 'node:crypto';
import { and, eq, gt, isNull } from 'drizzle-orm';
import type { Actor } from '../actor';
import type { App } from '../app';
import { person, session } from '../db/schema/people';

export const SESSION_COOKIE = 'duskline-session';
export const SESSION_DAYS = 30;

/** Who a session belongs to; null when it is unknown, over, or its person was disabled. */
export async function actorOfSession(
	app: Pick<App, 'database' | 'now'>,
	token: string | undefined
): Promise<Actor | null> {
	if (!token || token.length > 200) return null;
	const [row] = await app.database
		.select({
			id: person.id,
			name: person.name,
			initials: person.initials,
			email: person.email,
			roles: person.roles
		})
		.from(session)
		.innerJoin(person, eq(person.id, session.userId))
		.where(
			and(
				eq(session.sessionToken, token),
				gt(session.expires, app.now()),
				isNull(person.disabledAt)
			)
		);
	return row ?? null;
}

/** Opens a session for a person; only the demo's one-click sign-in calls it, Auth.js opens its own. */
export async function openSession(app: App, personId: string): Promise<string> {
	const token = randomBytes(32).toString('base64url');
	await app.database.insert(session).values({
		sessionToken: token,
		userId: personId,
		expires: new Date(app.now().getTime() + SESSION_DAYS * 86_400_000)
	});
	return token;
}

export async function closeSession(app: App, token: string | undefined): Promise<void> {
	if (token) await app.database.delete(session).where(eq(session.sessionToken, token));
}
