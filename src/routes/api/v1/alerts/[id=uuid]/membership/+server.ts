import { membershipSchema } from '$lib/domain/regroup';
import { answer, readJson } from '$lib/server/http/api';
import { setMembership } from '$lib/server/transients/regroupService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		const input = await readJson(event, 'regroupAlerts', membershipSchema);
		return setMembership(app, actor, event.params.id, input);
	});
