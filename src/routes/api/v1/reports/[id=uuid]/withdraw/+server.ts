import { withdrawSchema } from '$lib/domain/slot';
import { answer, readJson } from '$lib/server/http/api';
import { withdrawReport } from '$lib/server/reports/withdrawService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const { reason } = await readJson(event, 'withdrawReport', withdrawSchema);
		await withdrawReport(app, actor, event.params.id, reason);
		return { reportId: event.params.id };
	});
