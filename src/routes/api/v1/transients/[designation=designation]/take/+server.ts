import { answer } from '$lib/server/http/api';
import { takeTransient } from '$lib/server/transients/transientService';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = ({ locals, params }) =>
	answer(() => takeTransient(locals.app, locals.actor, params.designation));
