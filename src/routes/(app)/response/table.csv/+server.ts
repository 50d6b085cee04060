import { responseQuerySchema } from '$lib/domain/response';
import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { responseCsv, responseCsvName } from '$lib/server/response/responseCsv';
import { responseTables } from '$lib/server/response/responseService';
import type { RequestHandler } from './$types';

/** The table of the Response page as a file, with the same `?days=` and `?by=`. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewResponse');
		const query = parseInput(responseQuerySchema, Object.fromEntries(url.searchParams));
		const tables = await responseTables(locals.app, locals.actor, query);
		return new Response(responseCsv(tables), {
			headers: {
				'content-type': 'text/csv; charset=utf-8; header=present',
				'content-disposition': `attachment; filename="${responseCsvName(tables)}"`,
				'cache-control': 'private, no-store'
			}
		});
	});
