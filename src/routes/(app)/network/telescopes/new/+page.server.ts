import { redirect } from '@sveltejs/kit';
import { telescopeSchema } from '$lib/domain/telescope';
import { requirePermission } from '$lib/server/actor';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { createTelescope, observerCandidates } from '$lib/server/network/telescopeService';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		requirePermission(actor, 'editTelescopes');
		return { candidates: await observerCandidates(app, actor) };
	});

export const actions: Actions = {
	default: async (event) => {
		const { app, actor } = event.locals;
		const made = await formAction(event, 'editTelescopes', (input) =>
			createTelescope(app, actor, parseInput(telescopeSchema, input))
		);
		if ('code' in made) redirect(303, `/network/telescopes/${made.code}`);
		return made;
	}
};
