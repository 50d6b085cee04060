import { retryDelivery } from '$lib/server/circulars/deliveryLedgerService';
import { answer } from '$lib/server/http/api';
import type { RequestHandler } from './$types';

/** Queues a failed delivery again. */
export const POST: RequestHandler = ({ locals, params }) =>
	answer(async () => {
		await retryDelivery(locals.app, locals.actor, params.id);
		return { state: 'queued' };
	});
