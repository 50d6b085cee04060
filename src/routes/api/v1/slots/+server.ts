import { claimSchema } from '$lib/domain/slot';
import { answer, readJson } from '$lib/server/http/api';
import { claimSlot } from '$lib/server/slots/slotService';
import { listSlots } from '$lib/server/slots/slotList';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = ({ locals }) =>
	answer(async () => ({ slots: await listSlots(locals.app, locals.actor) }));

/** Claims a telescope; 409 names who has it. */
export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const claim = await readJson(event, 'claimSlot', claimSchema);
		return json(await claimSlot(app, actor, claim), { status: 201 });
	});
