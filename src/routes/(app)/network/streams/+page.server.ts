import { loadPage } from '$lib/server/http/page';
import { listStreams } from '$lib/server/streams/streamService';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		streams: await listStreams(event.locals.app, event.locals.actor)
	}));
