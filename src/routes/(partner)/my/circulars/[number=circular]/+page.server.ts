import { circularDetail } from '$lib/server/circulars/circularService';
import { loadPage } from '$lib/server/http/page';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		const { number, designation, title, body, publishedAt, author } = await circularDetail(
			app,
			actor,
			Number(event.params.number)
		);
		return { circular: { number, designation, title, body, publishedAt, author: author.name } };
	});
