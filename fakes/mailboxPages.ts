import type { Mail } from './mailbox';
import { escaped, instant, page } from './page';

const SITE = {
	site: 'Duskline mailbox',
	note: 'Mail of the demo ends here and goes no further.'
};

/** The list of mails, newest first, as a page that renews itself. */
export function mailListPage(mails: readonly Mail[], to: string | null): string {
	const shown = to ? mails.filter((mail) => mail.to.includes(to)) : mails;
	const rows = shown
		.map(
			(mail) => `<li><a href="/mail/${mail.id}"><strong>${escaped(mail.subject)}</strong>
<span class="soft">to ${escaped(mail.to.join(', '))} · ${instant(mail.receivedAt)}</span></a></li>`
		)
		.join('\n');
	const list = shown.length
		? `<ol>${rows}</ol>`
		: '<p>Nothing has come yet. A sign-in link or a circular arrives here within seconds.</p>';
	return page({
		...SITE,
		title: to ? `Mail to ${to}` : 'All mail',
		body: `${to ? '<p><a href="/">Show all mail</a></p>' : ''}${list}`,
		renews: true
	});
}

/** One mail: envelope, subject and its text with the links to follow. */
export function mailPage(mail: Mail): string {
	const recipients = mail.to
		.map((address) => `<a href="/?to=${encodeURIComponent(address)}">${escaped(address)}</a>`)
		.join(', ');
	const markup = mail.html
		? `<p><a href="/mail/${mail.id}/html">Show the formatted version</a></p>`
		: '';
	return page({
		...SITE,
		title: mail.subject,
		body: `<dl><dt>From</dt><dd>${escaped(mail.from)}</dd><dt>To</dt><dd>${recipients}</dd>
<dt>Received</dt><dd>${instant(mail.receivedAt)}</dd></dl>
<pre>${linked(mail.text)}</pre>${markup}<p><a href="/">Back to all mail</a></p>`
	});
}

function linked(text: string): string {
	// Split on addresses first: escaping before matching would cut a link at its `&amp;`.
	return text
		.split(/(https?:\/\/[^\s<>"')\]]+)/)
		.map((part, index) =>
			index % 2 === 1 ? `<a href="${escaped(part)}">${escaped(part)}</a>` : escaped(part)
		)
		.join('');
}
