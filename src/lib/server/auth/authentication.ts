import { Auth, raw, skipCSRFCheck, type AuthConfig } from '@auth/core';
import type { Adapter } from '@auth/core/adapters';
import Nodemailer from '@auth/core/providers/nodemailer';
import { DrizzleAdapter } from '@auth/drizzle-adapter';
import { and, eq, isNull } from 'drizzle-orm';
import type { App } from '../app';
import { account, person, session, verificationToken } from '../db/schema/people';
import { DomainError } from '../domainError';
import { logger } from '../logger';
import { mailer } from '../notify/mailer';
import { SESSION_COOKIE, SESSION_DAYS } from './session';
import { signInMail } from './signInMail';

const LINK_MINUTES = 30;
const PROVIDER = 'nodemailer';
/** The paths under /auth that Auth.js answers itself; the rest are pages of ours. */
const AUTH_PATHS = new Set([`/auth/callback/${PROVIDER}`]);

function authConfig(app: App): AuthConfig {
	const secure = app.config.origin.startsWith('https:');
	return {
		adapter: DrizzleAdapter(app.database, {
			usersTable: person,
			accountsTable: account,
			sessionsTable: session,
			verificationTokensTable: verificationToken
		} as never) as Adapter,
		basePath: '/auth',
		secret: app.config.authSecret,
		trustHost: true,
		// The origin is checked before any request gets here.
		skipCSRFCheck,
		session: { strategy: 'database', maxAge: SESSION_DAYS * 86_400 },
		pages: { signIn: '/auth/sign-in', verifyRequest: '/auth/sent', error: '/auth/sign-in' },
		cookies: {
			sessionToken: {
				name: SESSION_COOKIE,
				options: { httpOnly: true, sameSite: 'lax', path: '/', secure }
			}
		},
		providers: [
			Nodemailer({
				server: app.config.smtpUrl,
				from: app.config.mailFrom,
				maxAge: LINK_MINUTES * 60,
				sendVerificationRequest: async ({ identifier, url }) => {
					await mailer(app.config).send(
						signInMail(identifier, confirmAddress(app.config.origin, url), LINK_MINUTES)
					);
				}
			})
		],
		callbacks: {
			// Invited people only; nobody makes an account by asking for a link.
			signIn: async ({ user }) => Boolean(user.email && (await isInvited(app, user.email)))
		},
		events: {
			signIn: async ({ user }) => {
				if (!user.id) return;
				await app.database
					.update(person)
					.set({ joinedAt: app.now() })
					.where(and(eq(person.id, user.id), isNull(person.joinedAt)));
			}
		},
		logger: {
			error: (error) => logger.warn({ error: error.message, name: error.name }, 'sign-in'),
			warn: () => {},
			debug: () => {}
		}
	};
}

/**
 * The mailed link opens a page with one button, as mail scanners follow links and a link works once.
 */
function confirmAddress(origin: string, callbackUrl: string): string {
	const parameters = new URL(callbackUrl).searchParams;
	return `${origin}/auth/confirm?${parameters}`;
}

export async function isInvited(app: App, email: string): Promise<boolean> {
	const [row] = await app.database
		.select({ id: person.id })
		.from(person)
		.where(and(eq(person.email, email.trim().toLowerCase()), isNull(person.disabledAt)));
	return row !== undefined;
}

/**
 * Mails a sign-in link to an invited address and does nothing for any other, so that the answer does
 * not tell who is invited.
 *
 * @throws DomainError `unavailable` when the mail server does not take it.
 */
export async function requestSignInLink(app: App, email: string, to: string): Promise<void> {
	if (!(await isInvited(app, email))) return;
	const request = new Request(`${app.config.origin}/auth/signin/${PROVIDER}`, {
		method: 'POST',
		headers: { 'content-type': 'application/x-www-form-urlencoded' },
		body: new URLSearchParams({ email: email.trim().toLowerCase(), callbackUrl: localPath(to) })
	});
	const unavailable = new DomainError(
		'unavailable',
		'The mail could not be sent just now. Try again in a minute.'
	);
	try {
		const answer = (await Auth(request, { ...authConfig(app), raw })) as { redirect?: string };
		if (!answer.redirect?.includes('/verify-request')) throw unavailable;
	} catch (error) {
		logger.warn({ error: (error as Error).message }, 'sign-in mail');
		throw unavailable;
	}
}

/** Answers the one request that is Auth.js's own, the mailed link's target; null for any other. */
export async function answerAuth(app: App, request: Request): Promise<Response | null> {
	const url = new URL(request.url);
	if (!AUTH_PATHS.has(url.pathname)) return null;
	// The configured origin decides, whatever Host or X-Forwarded-Host the request carries.
	const own = new Request(new URL(url.pathname + url.search, app.config.origin), {
		headers: { cookie: request.headers.get('cookie') ?? '' }
	});
	const response = await Auth(own, authConfig(app));
	// Its redirects have immutable headers.
	return new Response(response.body, response);
}

/** A path of this site, or the start page: a link must not lead elsewhere. */
export function localPath(to: string | null | undefined): string {
	return to && /^\/(?![/\\])[^\s\\]*$/.test(to) ? to : '/';
}
