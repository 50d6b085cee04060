import { answer } from '$lib/server/http/api';
import { sendTestPush } from '$lib/server/notify/pushDeviceService';
import type { RequestHandler } from './$types';

/** Sends a test message to one of one's own devices. */
export const POST: RequestHandler = ({ locals, params }) =>
	answer(async () => sendTestPush(locals.app, locals.actor, params.id));
