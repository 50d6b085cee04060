import { redirect } from '@sveltejs/kit';
import { allows } from '$lib/domain/permissions';
import type { PageServerLoad } from './$types';

/** The start: each role's first screen. Public, as it only leads on. */
export const load: PageServerLoad = ({ locals }) => {
	if (!locals.actor) redirect(303, '/auth/sign-in');
	redirect(303, allows(locals.actor.roles, 'viewBoard') ? '/now' : '/my/circulars');
};
