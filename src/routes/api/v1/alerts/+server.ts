import { answer } from '$lib/server/http/api';
import { postedPacket } from '$lib/server/packets/postedPacket';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

/** Takes in a packet of the stream whose key the request carries: 201 when new, 200 for a copy, 202 when it is no alert. */
export const POST: RequestHandler = ({ request, locals }) =>
	answer(async () => {
		const intake = await postedPacket(locals.app, request);
		if (intake.kind === 'noted') return json({ noted: intake.reason }, { status: 202 });
		return json(intake.receipt, { status: intake.isNew ? 201 : 200 });
	});
