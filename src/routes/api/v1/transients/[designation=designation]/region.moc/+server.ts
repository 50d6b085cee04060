import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { download } from '$lib/server/http/download';
import { parseInput } from '$lib/server/http/problem';
import { regionMoc, regionMocSchema } from '$lib/server/transients/regionFiles';
import type { RequestHandler } from './$types';

/** Coverage map of the joint region: `?format=fits|json|ascii`, `?level=50|90`. */
export const GET: RequestHandler = ({ locals, params, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewTransients');
		const query = parseInput(regionMocSchema, Object.fromEntries(url.searchParams));
		return download(await regionMoc(locals.app, locals.actor, params.designation, query));
	});
