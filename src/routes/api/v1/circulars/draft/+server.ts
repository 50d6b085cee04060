import { draftCircular } from '$lib/server/circulars/circularService';
import { answer } from '$lib/server/http/api';
import type { RequestHandler } from './$types';

/** A pre-filled text for `?designation=`; nothing is kept. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () =>
		draftCircular(locals.app, locals.actor, url.searchParams.get('designation') ?? '')
	);
