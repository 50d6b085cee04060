import { answer } from '$lib/server/http/api';
import { transientDetail } from '$lib/server/transients/transientDetail';
import { transientRecord } from '$lib/server/transients/transientRecord';
import type { RequestHandler } from './$types';

/** Everything about one transient. */
export const GET: RequestHandler = ({ locals, params }) =>
	answer(async () =>
		transientRecord(await transientDetail(locals.app, locals.actor, params.designation))
	);
