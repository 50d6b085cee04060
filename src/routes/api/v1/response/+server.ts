import { responseQuerySchema } from '$lib/domain/response';
import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { responseTables } from '$lib/server/response/responseService';
import type { RequestHandler } from './$types';

/** How fast the team answered; `?days=` 30, 90 or 365, `?by=` telescope or stream. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewResponse');
		const query = parseInput(responseQuerySchema, Object.fromEntries(url.searchParams));
		return responseTables(locals.app, locals.actor, query);
	});
