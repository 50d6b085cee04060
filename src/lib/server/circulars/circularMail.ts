import { allows } from '../../domain/permissions';
import type { Config } from '../config';
import type { Mail } from '../notify/mailer';
import type { PushMessage } from '../notify/pusher';
import type { QueuedDelivery } from './deliveryStore';
import { utcMinute } from './plainWords';

type Sent = Pick<
	QueuedDelivery,
	'id' | 'number' | 'title' | 'body' | 'publishedAt' | 'designation' | 'author' | 'email' | 'roles'
>;

/** Where the reader finds the circular: partners have an archive of their own. */
export function circularPath({ number, roles }: Pick<Sent, 'number' | 'roles'>): string {
	return allows(roles, 'viewTransients') ? `/circulars/${number}` : `/my/circulars/${number}`;
}

/** The mail of one delivery. Its Message-ID is the delivery's own, the same on every try. */
export function circularMail(sent: Sent, advice: string[], config: Pick<Config, 'origin'>): Mail {
	const link = config.origin + circularPath(sent);
	const preferences = `${config.origin}/my/preferences`;
	const head = `Circular ${sent.number}, published ${utcMinute(sent.publishedAt!)} by ${sent.author}`;
	const text = [
		sent.title,
		head,
		'',
		sent.body,
		'',
		...(advice.length > 0 ? ['-'.repeat(40), ...advice, ''] : []),
		'-'.repeat(40),
		`Read it on the web: ${link}`,
		`Choose what you get: ${preferences}`,
		''
	].join('\n');
	return {
		to: sent.email,
		subject: `Circular ${sent.number}: ${sent.title}`,
		text,
		html: html({ sent, head, advice, link, preferences }),
		messageId: `delivery-${sent.id}@${new URL(config.origin).hostname}`,
		headers: {
			'List-Unsubscribe': `<${preferences}>`,
			'List-Id': `Duskline circulars <circulars.${new URL(config.origin).hostname}>`,
			// RFC 3834: keeps holiday replies from coming back.
			'Auto-Submitted': 'auto-generated',
			'X-Duskline-Transient': sent.designation
		}
	};
}

/** The push message of one delivery: the lock screen's title carries no position. */
export function circularPush(
	sent: Pick<Sent, 'number' | 'title' | 'designation' | 'roles'>
): PushMessage {
	return {
		title: `Circular ${sent.number}: ${sent.designation}`,
		body: sent.title,
		url: circularPath(sent),
		tag: `circular-${sent.number}`
	};
}

function html(parts: {
	sent: Sent;
	head: string;
	advice: string[];
	link: string;
	preferences: string;
}): string {
	const { sent, head, advice, link, preferences } = parts;
	const pre = 'font:14px/1.5 Menlo,Consolas,monospace;white-space:pre-wrap;margin:0 0 24px';
	return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><title>${escapeHtml(sent.title)}</title></head>
<body style="margin:0;padding:24px;background:#fffdf8;color:#1b1c33;font:16px/1.5 sans-serif">
<h1 style="font-size:20px;margin:0 0 4px">${escapeHtml(sent.title)}</h1>
<p style="color:#5d5a6e;margin:0 0 24px">${escapeHtml(head)}</p>
<pre style="${pre}">${escapeHtml(sent.body)}</pre>
${advice.length > 0 ? `<pre style="${pre};padding:12px 16px;border-left:3px solid #0f6e78">${escapeHtml(advice.join('\n'))}</pre>` : ''}
<p style="margin:0"><a href="${escapeHtml(link)}" style="color:#0f6e78">Read it on the web</a> · <a href="${escapeHtml(preferences)}" style="color:#0f6e78">Choose what you get</a></p>
</body></html>
`;
}

const ENTITIES: Record<string, string> = {
	'&': '&amp;',
	'<': '&lt;',
	'>': '&gt;',
	'"': '&quot;',
	"'": '&#39;'
};

export function escapeHtml(text: string): string {
	return text.replace(/[&<>"']/g, (character) => ENTITIES[character]!);
}
