import { localPath } from '$lib/server/auth/authentication';
import type { PageServerLoad } from './$types';

/** Public. The mailed link opens this; only the button uses the link up, as mail scanners follow links. */
export const load: PageServerLoad = ({ url, locals }) => {
	const callbackUrl = url.searchParams.get('callbackUrl') ?? '/';
	const { origin } = locals.app.config;
	return {
		token: url.searchParams.get('token') ?? '',
		email: url.searchParams.get('email') ?? '',
		callbackUrl: localPath(
			callbackUrl.startsWith(origin) ? callbackUrl.slice(origin.length) : callbackUrl
		)
	};
};
