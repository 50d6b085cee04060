import { randomUUID } from 'node:crypto';
import { redirect } from '@sveltejs/kit';
import { handAlertSchema } from '$lib/domain/handAlert';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { handAlertStreams, submitAlert } from '$lib/server/packets/submitAlertService';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		streams: await handAlertStreams(event.locals.app, event.locals.actor),
		submission: randomUUID()
	}));

export const actions: Actions = {
	default: async (event) => {
		const { app, actor } = event.locals;
		const outcome = await formAction(event, 'submitAlert', (input) =>
			submitAlert(app, actor, parseInput(handAlertSchema, input))
		);
		if ('designation' in outcome) redirect(303, `/transients/${outcome.designation}`);
		return outcome;
	}
};
