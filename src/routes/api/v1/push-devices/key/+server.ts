import { answer } from '$lib/server/http/api';
import { pushKey } from '$lib/server/notify/pushDeviceService';
import type { RequestHandler } from './$types';

/** The key that a browser's subscription is made for; null where no push is sent. */
export const GET: RequestHandler = ({ locals }) =>
	answer(async () => pushKey(locals.app, locals.actor));
