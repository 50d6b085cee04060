import { reportSchema } from '$lib/domain/slot';
import { answer, readJson } from '$lib/server/http/api';
import { reportSlot } from '$lib/server/reports/reportService';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const input = await readJson(event, 'reportSlot', reportSchema);
		return json(await reportSlot(app, actor, event.params.id, input), { status: 201 });
	});
