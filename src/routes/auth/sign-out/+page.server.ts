import { redirect } from '@sveltejs/kit';
import { closeSession, SESSION_COOKIE } from '$lib/server/auth/session';
import type { Actions, PageServerLoad } from './$types';

/** Public: leaving needs no permission, and a visit alone does nothing. */
export const load: PageServerLoad = () => redirect(303, '/');

export const actions: Actions = {
	default: async ({ locals, cookies }) => {
		await closeSession(locals.app, cookies.get(SESSION_COOKIE));
		cookies.delete(SESSION_COOKIE, { path: '/' });
		redirect(303, '/auth/sign-in');
	}
};
