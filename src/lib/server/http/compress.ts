import type { Handle } from '@sveltejs/kit';

/** Shorter bodies do not gain from it. */
const LEAST_BYTES = 1024;
const COMPRESSIBLE = /^(text\/|application\/(json|problem\+json|xml|javascript)|image\/svg)/;

/**
 * Compresses answers with gzip: the board is five times smaller, which a phone at night notices.
 * Static files are compressed at build time and do not pass here.
 */
export const compress: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	const { headers } = response;
	const length = headers.get('content-length');
	if (
		!response.body ||
		event.request.method === 'HEAD' ||
		headers.has('content-encoding') ||
		(length !== null && Number(length) < LEAST_BYTES) ||
		!COMPRESSIBLE.test(headers.get('content-type') ?? '') ||
		!/\bgzip\b/.test(event.request.headers.get('accept-encoding') ?? '')
	) {
		return response;
	}
	const out = new Response(response.body.pipeThrough(new CompressionStream('gzip')), response);
	out.headers.set('content-encoding', 'gzip');
	out.headers.append('vary', 'Accept-Encoding');
	out.headers.delete('content-length');
	const etag = out.headers.get('etag');
	// The compressed form is another representation: its validator is a weak one.
	if (etag && !etag.startsWith('W/')) out.headers.set('etag', `W/${etag}`);
	return out;
};
