import { loadPage } from '$lib/server/http/page';
import { boardFor } from '$lib/server/transients/board';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		board: await boardFor(event.locals.app, event.locals.actor)
	}));
