import { apiPage } from '$lib/server/apiDescription/apiPage';
import type { PageServerLoad } from './$types';

/** The description of the API. Public. */
export const load: PageServerLoad = ({ locals }) => apiPage(locals.app.config.origin);
