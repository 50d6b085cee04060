import { observationQuerySchema } from '$lib/domain/observationQuery';
import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { listObservations } from '$lib/server/export/observationStore';
import { observationTable } from '$lib/server/export/observationTable';
import { tableAnswer } from '$lib/server/export/tableAnswer';
import type { RequestHandler } from './$types';

/** Planned and performed observations as a file; `?designation=`, `?from=` and `&to=` narrow it. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewSlots');
		const query = parseInput(observationQuerySchema, Object.fromEntries(url.searchParams));
		const rows = await listObservations(locals.app, locals.actor, query);
		const stem = query.designation ? `${query.designation}-observations` : 'observations';
		return tableAnswer(observationTable(rows), 'vot', stem);
	});
