import { loadPage } from '$lib/server/http/page';
import { transientDetail } from '$lib/server/transients/transientDetail';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, () =>
		transientDetail(event.locals.app, event.locals.actor, event.params.designation)
	);
