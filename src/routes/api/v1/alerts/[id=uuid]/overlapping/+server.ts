import { answer } from '$lib/server/http/api';
import { alertsOverlapping } from '$lib/server/transients/skySearch';
import type { RequestHandler } from './$types';

/** Alerts whose own 90 % area overlaps this one's; `alerts` is null for a retraction. */
export const GET: RequestHandler = ({ locals, params }) =>
	answer(async () => ({
		alerts: await alertsOverlapping(locals.app, locals.actor, params.id)
	}));
