import { json } from '@sveltejs/kit';
import { regionVersionSchema } from '$lib/domain/regionOutline';
import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { matchesEtag } from '$lib/server/http/etag';
import { parseInput } from '$lib/server/http/problem';
import { regionOutline, regionVersion } from '$lib/server/transients/regionOutline';
import type { RequestHandler } from './$types';

/** Outlines of the joint region's 50 % and 90 % areas; of an earlier `?version=`. 304 while it is the same. */
export const GET: RequestHandler = ({ locals, params, request, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewBoard');
		const { version } = parseInput(regionVersionSchema, Object.fromEntries(url.searchParams));
		const wanted = await regionVersion(
			locals.app,
			locals.actor,
			params.designation,
			version ?? null
		);
		const etag = `"${wanted.version}"`;
		const headers = { etag, 'cache-control': 'private, no-cache', vary: 'Cookie' };
		if (matchesEtag(request.headers.get('if-none-match'), etag)) {
			return new Response(null, { status: 304, headers });
		}
		return json(await regionOutline(locals.app, locals.actor, wanted), { headers });
	});
