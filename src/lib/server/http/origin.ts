import type { Handle } from '@sveltejs/kit';
import { DomainError } from '../domainError';
import { problemResponse } from './problem';

const SAFE_METHODS = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses state-changing requests that come from another origin. Requests to the API that carry a key
 * need no origin: a browser never adds that header by itself. Stands first, as Kit's own check is off.
 */
export const checkOrigin: Handle = async ({ event, resolve }) => {
	const { request, url } = event;
	if (SAFE_METHODS.has(request.method)) return resolve(event);
	const withKey = url.pathname.startsWith('/api/') && request.headers.has('authorization');
	if (withKey || request.headers.get('origin') === event.locals.app.config.origin) {
		return resolve(event);
	}
	// An unread body would reset the connection before the answer arrives.
	await request.arrayBuffer().catch(() => undefined);
	return problemResponse(
		new DomainError('originRefused', 'This request does not come from Duskline’s own pages.')
	);
};
