import { ROLE_LABELS, type Role } from '../../domain/vocabulary';
import { escapeHtml } from '../circulars/circularMail';
import type { Mail } from '../notify/mailer';

export type Invitation = {
	personId: string;
	to: string;
	name: string;
	roles: readonly Role[];
	invitedBy: string;
	invitedAtMs: number;
};

/** The mail that tells somebody that they may sign in, and where. */
export function invitationMail(invitation: Invitation, origin: string): Mail {
	const { personId, to, name, roles, invitedBy, invitedAtMs } = invitation;
	const link = `${origin}/auth/sign-in`;
	const labels = roles.map((role) => ROLE_LABELS[role].toLowerCase()).join(', ');
	return {
		to,
		subject: 'You are invited to Duskline',
		text: [
			`Hello ${name},`,
			'',
			`${invitedBy} has invited you to Duskline, where a follow-up network handles`,
			`alerts of high-energy transients. Your roles: ${labels}.`,
			'',
			'Sign in with this e-mail address; you get a link, no password is needed:',
			'',
			link,
			'',
			'If you do not expect this, ignore it: nothing happens.',
			''
		].join('\n'),
		html: [
			`<p>Hello ${escapeHtml(name)},</p>`,
			`<p>${escapeHtml(invitedBy)} has invited you to Duskline, where a follow-up network handles alerts of high-energy transients. Your roles: ${escapeHtml(labels)}.</p>`,
			`<p><a href="${escapeHtml(link)}">Sign in</a> with this e-mail address; you get a link, no password is needed.</p>`,
			'<p>If you do not expect this, ignore it: nothing happens.</p>'
		].join('\n'),
		messageId: `invitation.${personId}.${invitedAtMs}@${new URL(origin).hostname}`
	};
}
