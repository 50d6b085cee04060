import { loadPage } from '$lib/server/http/page';
import { listTelescopes } from '$lib/server/network/telescopeService';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		telescopes: await listTelescopes(event.locals.app, event.locals.actor)
	}));
