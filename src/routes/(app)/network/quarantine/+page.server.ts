import { z } from 'zod';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import { dismissPacket, listQuarantine, replayPacket } from '$lib/server/packets/quarantineService';
import type { Actions, PageServerLoad } from './$types';

const idSchema = z.object({ id: z.coerce.number().int().positive() });

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { packets, total } = await listQuarantine(event.locals.app, event.locals.actor);
		const open = Number(event.url.searchParams.get('open'));
		return {
			total,
			// Only the one that is looked at: a hundred bodies are megabytes.
			packets: packets.map(({ text, ...row }) => ({ ...row, text: row.id === open ? text : null }))
		};
	});

export const actions: Actions = {
	replay: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { id } = parseInput(idSchema, input);
			const intake = await replayPacket(event.locals.app, event.locals.actor, id);
			return intake.kind === 'alert'
				? { read: { designation: intake.receipt.designation, isNew: intake.isNew } }
				: { noted: intake.reason };
		}),
	dismiss: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { id } = parseInput(idSchema, input);
			await dismissPacket(event.locals.app, event.locals.actor, id);
			return { dismissed: true };
		})
};
