import { answer } from '$lib/server/http/api';
import { releaseSlot } from '$lib/server/slots/slotService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = ({ locals, params }) =>
	answer(async () => {
		await releaseSlot(locals.app, locals.actor, params.id);
		return { slotId: params.id };
	});
