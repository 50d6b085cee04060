import { decisionSchema } from '$lib/domain/decision';
import { answer, readJson } from '$lib/server/http/api';
import { decideTransient } from '$lib/server/transients/transientService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const input = await readJson(event, 'decideTransient', decisionSchema);
		return decideTransient(app, actor, event.params.designation, input);
	});
