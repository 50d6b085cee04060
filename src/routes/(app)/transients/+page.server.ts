import { z } from 'zod';
import { DECISIONS, TRANSIENT_STATES } from '$lib/domain/vocabulary';
import { loadPage } from '$lib/server/http/page';
import { listTransients } from '$lib/server/transients/transientList';
import type { PageServerLoad } from './$types';

/** Odd values in a link mean no filter: an old bookmark must not break the page. */
const querySchema = z.object({
	search: z.string().trim().max(20).catch(''),
	state: z.enum(TRANSIENT_STATES).optional().catch(undefined),
	decision: z.enum(DECISIONS).optional().catch(undefined),
	before: z.coerce.date().optional().catch(undefined)
});

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const query = querySchema.parse({
			search: '',
			...Object.fromEntries(event.url.searchParams)
		});
		const { before, ...filter } = query;
		const list = await listTransients(event.locals.app, event.locals.actor, {
			...filter,
			before
		});
		return { ...list, filter, first: before === undefined };
	});
