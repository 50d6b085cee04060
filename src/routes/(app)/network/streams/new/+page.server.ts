import { redirect } from '@sveltejs/kit';
import { streamCreateSchema } from '$lib/domain/stream';
import { requirePermission } from '$lib/server/actor';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { createStream } from '$lib/server/streams/streamService';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		requirePermission(event.locals.actor, 'editStreams');
		return {};
	});

export const actions: Actions = {
	default: async (event) => {
		const { app, actor } = event.locals;
		const made = await formAction(event, 'editStreams', (input) =>
			createStream(app, actor, parseInput(streamCreateSchema, input))
		);
		if ('code' in made) redirect(303, `/network/streams/${made.code}`);
		return made;
	}
};
