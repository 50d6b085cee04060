import { answer } from '$lib/server/http/api';
import { removePushDevice } from '$lib/server/notify/pushDeviceService';
import type { RequestHandler } from './$types';

/** Takes one of one's own devices off the list. */
export const DELETE: RequestHandler = ({ locals, params }) =>
	answer(async () => {
		await removePushDevice(locals.app, locals.actor, params.id);
		return new Response(null, { status: 204 });
	});
