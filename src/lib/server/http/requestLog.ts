import type { Handle } from '@sveltejs/kit';
import { logger } from '../logger';

/** One line per request: method, route, status and time. No query, as it may hold a token. */
export const requestLog: Handle = async ({ event, resolve }) => {
	const startMs = performance.now();
	const response = await resolve(event);
	const level = response.status >= 500 ? 'error' : 'debug';
	logger[level](
		{
			id: event.locals.requestId,
			method: event.request.method,
			route: event.route.id ?? event.url.pathname,
			status: response.status,
			ms: Math.round(performance.now() - startMs)
		},
		'request'
	);
	return response;
};
