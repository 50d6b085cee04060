import { viewerOf } from '$lib/server/auth/viewer';
import type { LayoutServerLoad } from './$types';

/** Who is signed in and how the page looks; holds nothing that needs a permission. */
export const load: LayoutServerLoad = async ({ locals }) => ({
	viewer: locals.actor ? await viewerOf(locals.app, locals.actor) : null,
	theme: locals.theme,
	demo: locals.app.config.demo
});
