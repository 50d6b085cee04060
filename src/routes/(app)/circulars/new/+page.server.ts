import { redirect } from '@sveltejs/kit';
import { publishSchema } from '$lib/domain/circular';
import {
	draftCircular,
	listCirculars,
	publishableTransients,
	publishCircular
} from '$lib/server/circulars/circularService';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		const designation = event.url.searchParams.get('transient');
		const choices = await publishableTransients(app, actor);
		if (!designation) return { choices, draft: null, earlier: [] };
		const draft = await draftCircular(app, actor, designation);
		const { circulars } = await listCirculars(app, actor, { designation });
		return { choices, draft, earlier: circulars };
	});

export const actions: Actions = {
	default: async (event) => {
		const { app, actor } = event.locals;
		const outcome = await formAction(event, 'writeCircular', (input) =>
			publishCircular(app, actor, parseInput(publishSchema, input))
		);
		if ('number' in outcome) redirect(303, `/circulars/${outcome.number}`);
		return outcome;
	}
};
