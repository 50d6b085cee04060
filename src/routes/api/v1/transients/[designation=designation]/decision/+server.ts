import { decisionSchema } from '$lib/domain/decision';
import { requirePermission } from '$lib/server/actor';
import { answer, readJson } from '$lib/server/http/api';
import { decideTransient } from '$lib/server/transients/transientService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		requirePermission(actor, 'decideTransient');
		const input = await readJson(event, decisionSchema);
		return decideTransient(app, actor, event.params.designation, input);
	});
