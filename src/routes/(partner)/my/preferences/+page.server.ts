import { z } from 'zod';
import { preferencesFormSchema } from '$lib/domain/preferences';
import { requirePermission } from '$lib/server/actor';
import { formAction } from '$lib/server/http/formAction';
import { loadPage, runAction } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { removePushDevice, sendTestPush } from '$lib/server/notify/pushDeviceService';
import { preferencesView, savePreferences } from '$lib/server/partners/preferencesService';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => preferencesView(event.locals.app, event.locals.actor));

const deviceSchema = z.object({ deviceId: z.uuid() });

export const actions: Actions = {
	save: (event) =>
		runAction(async () => {
			const { app, actor } = event.locals;
			requirePermission(actor, 'setPreferences');
			const form = await event.request.formData();
			const preferences = parseInput(preferencesFormSchema, {
				...Object.fromEntries(form),
				streamCodes: form.getAll('streamCodes')
			});
			await savePreferences(app, actor, preferences);
			return { done: 'Saved.' };
		}),
	remove: (event) =>
		formAction(event, 'setPreferences', async (input) => {
			const { deviceId } = parseInput(deviceSchema, input);
			await removePushDevice(event.locals.app, event.locals.actor, deviceId);
			return { done: 'The device was taken off the list.' };
		}),
	test: (event) =>
		formAction(event, 'setPreferences', async (input) => {
			const { deviceId } = parseInput(deviceSchema, input);
			await sendTestPush(event.locals.app, event.locals.actor, deviceId);
			return { done: 'Sent. It should appear on the device within seconds.' };
		})
};
