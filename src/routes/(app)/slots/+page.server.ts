import { loadPage } from '$lib/server/http/page';
import { listSlots } from '$lib/server/slots/slotList';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		slots: await listSlots(event.locals.app, event.locals.actor)
	}));
