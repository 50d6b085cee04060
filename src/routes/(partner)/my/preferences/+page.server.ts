import { z } from 'zod';
import { preferencesFormSchema } from '$lib/domain/preferences';
import { loadPage, runAction } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { removePushDevice, sendTestPush } from '$lib/server/notify/pushDeviceService';
import { preferencesView, savePreferences } from '$lib/server/partners/preferencesService';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => preferencesView(event.locals.app, event.locals.actor));

const deviceSchema = z.object({ deviceId: z.uuid() });

export const actions: Actions = {
	save: async ({ request, locals }) => {
		const form = await request.formData();
		return runAction(async () => {
			const preferences = parseInput(preferencesFormSchema, {
				...Object.fromEntries(form),
				streamCodes: form.getAll('streamCodes')
			});
			await savePreferences(locals.app, locals.actor, preferences);
			return { done: 'Saved.' };
		});
	},
	remove: async ({ request, locals }) => {
		const form = Object.fromEntries(await request.formData());
		return runAction(async () => {
			const { deviceId } = parseInput(deviceSchema, form);
			await removePushDevice(locals.app, locals.actor, deviceId);
			return { done: 'The device was taken off the list.' };
		});
	},
	test: async ({ request, locals }) => {
		const form = Object.fromEntries(await request.formData());
		return runAction(async () => {
			const { deviceId } = parseInput(deviceSchema, form);
			await sendTestPush(locals.app, locals.actor, deviceId);
			return { done: 'Sent. It should appear on the device within seconds.' };
		});
	}
};
