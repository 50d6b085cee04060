import type { Handle } from '@sveltejs/kit';

/** Headers on every answer; the content security policy itself is Kit's (svelte.config.js). */
export const securityHeaders: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	const { headers } = response;
	headers.set('x-content-type-options', 'nosniff');
	headers.set('x-frame-options', 'DENY');
	headers.set('referrer-policy', 'same-origin');
	headers.set('permissions-policy', 'camera=(), microphone=(), geolocation=()');
	headers.set('cross-origin-opener-policy', 'same-origin');
	if (event.locals.app.config.origin.startsWith('https:')) {
		headers.set('strict-transport-security', 'max-age=31536000; includeSubDomains');
	}
	if (event.locals.actor && !headers.has('cache-control')) {
		headers.set('cache-control', 'private, no-cache');
	}
	return response;
};
