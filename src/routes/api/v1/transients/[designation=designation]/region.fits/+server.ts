import { answer } from '$lib/server/http/api';
import { download } from '$lib/server/http/download';
import { regionMap } from '$lib/server/transients/regionFiles';
import type { RequestHandler } from './$types';

/** The joint region as a multi-order HEALPix map. */
export const GET: RequestHandler = ({ locals, params }) =>
	answer(async () => download(await regionMap(locals.app, locals.actor, params.designation)));
