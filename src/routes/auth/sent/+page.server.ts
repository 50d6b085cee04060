import type { PageServerLoad } from './$types';

/** Public. */
export const load: PageServerLoad = ({ locals }) => ({
	mailboxUrl: locals.app.config.demo ? locals.app.config.mailboxUrl : null
});
