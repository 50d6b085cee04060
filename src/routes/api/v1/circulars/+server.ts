import { circularFilterSchema, publishSchema } from '$lib/domain/circular';
import { requirePermission } from '$lib/server/actor';
import { listCirculars, publishCircular } from '$lib/server/circulars/circularService';
import { answer, readJson } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

/** The archive, newest first; `?before=` gives the next page. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewCirculars');
		const { mine, ...filter } = parseInput(
			circularFilterSchema,
			Object.fromEntries(url.searchParams)
		);
		return listCirculars(locals.app, locals.actor, { ...filter, onlyMine: mine === 'on' });
	});

/** Publishes: 201 with the number, 200 when this draft is out already. */
export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const input = await readJson(event, 'writeCircular', publishSchema);
		const { number, created } = await publishCircular(app, actor, input);
		return json(
			{ number },
			{ status: created ? 201 : 200, headers: { location: `/api/v1/circulars/${number}` } }
		);
	});
