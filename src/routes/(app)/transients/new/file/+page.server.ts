import { loadPage, runAction } from '$lib/server/http/page';
import { enterableStreams, enterFile } from '$lib/server/packets/enteredFile';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		return { streams: await enterableStreams(app, actor) };
	});

export const actions: Actions = {
	/** The body is a file of up to 64 MiB: it is read as it arrives, never whole. */
	default: ({ locals, request }) =>
		runAction(async () => ({ entered: await enterFile(locals.app, locals.actor, request) }))
};
