import { circularDetail } from '$lib/server/circulars/circularService';
import { answer } from '$lib/server/http/api';
import type { RequestHandler } from './$types';

/** One published circular. */
export const GET: RequestHandler = ({ locals, params }) =>
	answer(async () => circularDetail(locals.app, locals.actor, Number(params.number)));
