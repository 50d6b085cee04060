import { responseQuerySchema } from '$lib/domain/response';
import { requirePermission } from '$lib/server/actor';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { responseTables } from '$lib/server/response/responseService';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		requirePermission(event.locals.actor, 'viewResponse');
		const query = parseInput(responseQuerySchema, Object.fromEntries(event.url.searchParams));
		return { tables: await responseTables(event.locals.app, event.locals.actor, query) };
	});
