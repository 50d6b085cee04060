import { redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { localPath, requestSignInLink } from '$lib/server/auth/authentication';
import { runAction } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import type { Actions, PageServerLoad } from './$types';

const signInSchema = z.object({
	email: z.email('must be an e-mail address').max(254),
	to: z.string().max(500).default('/')
});

/** Public. */
export const load: PageServerLoad = ({ locals, url }) => {
	const to = localPath(url.searchParams.get('to') ?? url.searchParams.get('callbackUrl'));
	if (locals.actor) redirect(303, to);
	return {
		to,
		// Auth.js sends people back here when a link was used before or has run out.
		linkFailed: url.searchParams.has('error'),
		mailboxUrl: locals.app.config.demo ? locals.app.config.mailboxUrl : null
	};
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const refused = await runAction(async () => {
			const form = parseInput(signInSchema, Object.fromEntries(await request.formData()));
			await requestSignInLink(locals.app, form.email, form.to);
		});
		if (refused) return refused;
		redirect(303, '/auth/sent');
	}
};
