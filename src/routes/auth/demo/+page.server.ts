import { error, redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { demoPeople } from '$lib/server/auth/viewer';
import { openSession, SESSION_COOKIE, SESSION_DAYS } from '$lib/server/auth/session';
import { parseInput } from '$lib/server/http/problem';
import type { Actions, PageServerLoad } from './$types';

/** Not there unless the demo switch is on; a start with another than a loopback origin refuses the switch. */
function requireDemo(locals: App.Locals): void {
	if (!locals.app.config.demo) error(404, 'There is no such page.');
}

export const load: PageServerLoad = async ({ locals }) => {
	requireDemo(locals);
	return { people: await demoPeople(locals.app), mailboxUrl: locals.app.config.mailboxUrl };
};

export const actions: Actions = {
	default: async ({ request, locals, cookies }) => {
		requireDemo(locals);
		const { person } = parseInput(
			z.object({ person: z.uuid() }),
			Object.fromEntries(await request.formData())
		);
		const known = (await demoPeople(locals.app)).some((item) => item.id === person);
		if (!known) error(404, 'There is no such person in the demo.');
		cookies.set(SESSION_COOKIE, await openSession(locals.app, person), {
			path: '/',
			httpOnly: true,
			sameSite: 'lax',
			secure: false,
			maxAge: SESSION_DAYS * 86_400
		});
		redirect(303, '/');
	}
};
