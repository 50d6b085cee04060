import { z } from 'zod';
import { watchSchema } from '$lib/domain/watch';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { removeWatch, rotaAhead, saveWatch } from '$lib/server/rota/rotaService';
import type { Actions, PageServerLoad } from './$types';

const DAYS_AHEAD = 14;
const removeSchema = z.object({ id: z.uuid('There is no such watch.') });

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		return {
			rota: await rotaAhead(app, actor, DAYS_AHEAD),
			days: DAYS_AHEAD,
			now: app.now().toISOString()
		};
	});

export const actions: Actions = {
	save: (event) =>
		formAction(event, 'editRota', async (input) => {
			await saveWatch(event.locals.app, event.locals.actor, parseInput(watchSchema, input));
			return { saved: 'The watch is saved.' };
		}),
	remove: (event) =>
		formAction(event, 'editRota', async (input) => {
			await removeWatch(event.locals.app, event.locals.actor, parseInput(removeSchema, input));
			return { saved: 'The watch is removed.' };
		})
};
