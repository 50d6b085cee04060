import { loadPage } from '$lib/server/http/page';
import { networkNotices } from '$lib/server/streams/streamHealthService';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = (event) =>
	loadPage(event, async () => ({
		notices: await networkNotices(event.locals.app, event.locals.actor)
	}));
