import { json } from '@sveltejs/kit';
import { openApiDocument } from '$lib/server/apiDescription/openApiDocument';
import type { RequestHandler } from './$types';

/** The API's description, OpenAPI 3.1. Public. */
export const GET: RequestHandler = ({ locals }) =>
	json(openApiDocument(locals.app.config.origin), {
		headers: { 'cache-control': 'public, max-age=300' }
	});
