import { pushDeviceSchema } from '$lib/domain/preferences';
import { answer, readJson } from '$lib/server/http/api';
import { listPushDevices, registerPushDevice } from '$lib/server/notify/pushDeviceService';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

/** One's own devices. */
export const GET: RequestHandler = ({ locals }) =>
	answer(async () => ({ devices: await listPushDevices(locals.app, locals.actor) }));

/** Registers a browser that has allowed push. */
export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const input = await readJson(event, 'setPreferences', pushDeviceSchema);
		return json(await registerPushDevice(app, actor, input), { status: 201 });
	});
