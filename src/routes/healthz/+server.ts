import { isHealthy } from '$lib/server/health';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

/** Whether this process can work: 200 when the database answers, 503 when not. Public. */
export const GET: RequestHandler = async ({ locals }) =>
	(await isHealthy(locals.app))
		? json({ status: 'ok' })
		: json({ status: 'no database' }, { status: 503 });
