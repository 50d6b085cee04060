import { membershipSchema } from '$lib/domain/regroup';
import { requirePermission } from '$lib/server/actor';
import { answer, readJson } from '$lib/server/http/api';
import { setMembership } from '$lib/server/transients/regroupService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	answer(async () => {
		const { app, actor } = event.locals;
		requirePermission(actor, 'regroupAlerts');
		const input = await readJson(event, membershipSchema);
		return setMembership(app, actor, event.params.id, input);
	});
