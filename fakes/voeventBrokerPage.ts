import { escaped, instant, page } from './page';
import type { BrokeredEvent } from './voeventBroker';

const WORDS: Record<BrokeredEvent['state'], string> = {
	waiting: 'waits for a subscriber',
	sent: 'sent, not answered yet',
	acked: 'acknowledged',
	naked: 'not kept by the subscriber'
};

/** What the broker was handed, newest first, as a page that renews itself. */
export function brokerPage(events: readonly BrokeredEvent[], subscribers: number): string {
	const rows = events
		.map(
			({ ivorn, state, sends, postedAt, result }) => `<li><div><strong>${escaped(ivorn)}</strong>
<span class="soft">${instant(postedAt)} · ${WORDS[state]}${sends > 1 ? `, sent ${sends} times` : ''}
${result ? ` · ${escaped(result)}` : ''}</span></div></li>`
		)
		.join('\n');
	const connected = subscribers === 1 ? '1 subscriber is' : `${subscribers} subscribers are`;
	return page({
		site: 'Duskline VOEvent broker',
		note: 'VOEvents of the demo go out here, by the VOEvent Transport Protocol.',
		title: 'VOEvents',
		body: `<p>${connected} connected.</p>${rows ? `<ol>${rows}</ol>` : '<p>Nothing was posted yet.</p>'}`,
		renews: true
	});
}
