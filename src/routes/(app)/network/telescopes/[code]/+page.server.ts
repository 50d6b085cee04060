import { redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { closureSchema, telescopeSchema } from '$lib/domain/telescope';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { addClosure, removeClosure } from '$lib/server/network/closureService';
import {
	editTelescope,
	observerCandidates,
	retireTelescope,
	telescopeDetail
} from '$lib/server/network/telescopeService';
import type { Actions, PageServerLoad } from './$types';

const removeClosureSchema = z.object({ closureId: z.uuid('There is no such closure.') });
const retireSchema = z.object({ retired: z.enum(['yes', 'no']) });

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		return {
			telescope: await telescopeDetail(app, actor, event.params.code),
			candidates: await observerCandidates(app, actor),
			now: app.now().toISOString()
		};
	});

export const actions: Actions = {
	save: async (event) => {
		const { app, actor } = event.locals;
		const saved = await formAction(event, 'editTelescopes', (input) =>
			editTelescope(app, actor, event.params.code, parseInput(telescopeSchema, input))
		);
		if ('code' in saved && saved.code !== event.params.code) {
			redirect(303, `/network/telescopes/${saved.code}`);
		}
		return 'code' in saved ? { saved: 'telescope' as const } : saved;
	},
	close: (event) =>
		formAction(event, 'closeTelescope', async (input) => {
			const { app, actor } = event.locals;
			await addClosure(app, actor, event.params.code, parseInput(closureSchema, input));
			return { saved: 'closure' as const };
		}),
	reopen: (event) =>
		formAction(event, 'closeTelescope', async (input) => {
			const { closureId } = parseInput(removeClosureSchema, input);
			await removeClosure(event.locals.app, event.locals.actor, event.params.code, closureId);
			return { saved: 'closure' as const };
		}),
	retire: (event) =>
		formAction(event, 'editTelescopes', async (input) => {
			const retired = parseInput(retireSchema, input).retired === 'yes';
			await retireTelescope(event.locals.app, event.locals.actor, event.params.code, retired);
			return { saved: 'service' as const };
		})
};
