import type { Mail } from '../notify/mailer';

/** The mail with the sign-in link; the address holds only URL-encoded characters. */
export function signInMail(to: string, link: string, minutes: number): Mail {
	const html = link.replaceAll('&', '&amp;').replaceAll('"', '&quot;');
	return {
		to,
		subject: 'Your Duskline sign-in link',
		text: `Sign in to Duskline:\n\n${link}\n\nThe link works once and for ${minutes} minutes.\nIf you did not ask for it, ignore this mail: nobody can sign in without it.\n`,
		html: `<p><a href="${html}">Sign in to Duskline</a></p><p>The link works once and for ${minutes} minutes.</p><p>If you did not ask for it, ignore this mail: nobody can sign in without it.</p>`
	};
}
