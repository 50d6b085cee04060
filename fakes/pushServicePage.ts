import { escaped, instant, page } from './page';
import type { PushMessage } from './pushService';

/** What the registered devices would have shown, newest first, as a page that renews itself. */
export function deliveriesPage(messages: readonly PushMessage[], deviceCount: number): string {
	const rows = messages
		.map(
			(message) => `<li><div><strong>${escaped(message.text)}</strong>
<span class="soft">on ${escaped(message.label)} · ${instant(message.receivedAt)} · ${escaped(message.urgency)},
kept ${message.ttlS} s</span></div></li>`
		)
		.join('\n');
	const devices = deviceCount === 1 ? '1 device is' : `${deviceCount} devices are`;
	return page({
		site: 'Duskline push service',
		note: 'Push messages of the demo end here and go no further.',
		title: 'Messages',
		body: `<p>${devices} registered.</p>${rows ? `<ol>${rows}</ol>` : '<p>Nothing has come yet.</p>'}`,
		renews: true
	});
}
