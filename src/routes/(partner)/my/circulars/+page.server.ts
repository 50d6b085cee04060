import { circularFilterSchema } from '$lib/domain/circular';
import { requirePermission } from '$lib/server/actor';
import { listCirculars } from '$lib/server/circulars/circularService';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		requirePermission(actor, 'viewCirculars');
		const { mine, ...filter } = parseInput(
			circularFilterSchema,
			Object.fromEntries(event.url.searchParams)
		);
		const onlyMine = mine === 'on';
		const page = await listCirculars(app, actor, { ...filter, onlyMine });
		return { ...page, search: filter.search ?? '', onlyMine };
	});
