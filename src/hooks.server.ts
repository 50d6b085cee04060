import { randomUUID } from 'node:crypto';
import { building } from '$app/environment';
import type { Handle, HandleServerError, ServerInit } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { THEMES, type Theme } from '$lib/domain/vocabulary';
import { answerAuth } from '$lib/server/auth/authentication';
import { actorOfSession, SESSION_COOKIE } from '$lib/server/auth/session';
import { compress } from '$lib/server/http/compress';
import { checkOrigin } from '$lib/server/http/origin';
import { requestLog } from '$lib/server/http/requestLog';
import { securityHeaders } from '$lib/server/http/securityHeaders';
import { logger } from '$lib/server/logger';
import { currentRuntime, replaceRuntime } from '$lib/server/runtime';

export const init: ServerInit = async () => {
	if (building) return;
	await replaceRuntime();
	process.once('sveltekit:shutdown', () => {
		currentRuntime()
			.then((runtime) => runtime.stop())
			.catch((error: unknown) => logger.error({ error: (error as Error).message }, 'stopping'))
			.finally(() => process.exit(0));
	});
};

const context: Handle = async ({ event, resolve }) => {
	const { app } = await currentRuntime();
	event.locals.app = app;
	event.locals.requestId = randomUUID();
	event.locals.theme = themeOf(event.cookies.get('duskline-theme'));
	event.locals.actor = await actorOfSession(app, event.cookies.get(SESSION_COOKIE));
	return resolve(event, {
		transformPageChunk: ({ html }) => html.replace('%duskline.theme%', event.locals.theme)
	});
};

const signIn: Handle = async ({ event, resolve }) =>
	(await answerAuth(event.locals.app, event.request)) ?? resolve(event);

export const handle = sequence(context, requestLog, securityHeaders, compress, checkOrigin, signIn);

export const handleError: HandleServerError = ({ error, event, status }) => {
	const requestId = event.locals.requestId;
	if (status !== 404) {
		const { message, stack } = error instanceof Error ? error : new Error(String(error));
		logger.error({ id: requestId, route: event.route.id, error: message, stack }, 'request failed');
	}
	return {
		message: status === 404 ? 'There is no such page.' : 'Something went wrong on our side.',
		requestId
	};
};

function themeOf(cookie: string | undefined): Theme {
	return THEMES.find((theme) => theme === cookie) ?? 'paper';
}
