import { z } from 'zod';
import { publishSchema } from '$lib/domain/circular';
import { listCirculars, publishCircular } from '$lib/server/circulars/circularService';
import { answer, readJson } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

const filterSchema = z.object({
	designation: z.string().max(20).optional(),
	search: z.string().max(100).optional(),
	before: z.coerce.number().int().min(1).max(999_999_999).optional()
});

/** The archive, newest first; `?before=` gives the next page. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () =>
		listCirculars(
			locals.app,
			locals.actor,
			parseInput(filterSchema, Object.fromEntries(url.searchParams))
		)
	);

/** Publishes: 201 with the number, 200 when this draft is out already. */
export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const input = await readJson(event, publishSchema);
		const { number, created } = await publishCircular(app, actor, input);
		return json(
			{ number },
			{ status: created ? 201 : 200, headers: { location: `/api/v1/circulars/${number}` } }
		);
	});
