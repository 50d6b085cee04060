import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { oneLine } from './mailer';
import { isInsideAddress } from './publicEndpoint';
import { LARGEST_PUSH_BYTES, payload, pushTopic } from './pusher';

describe('a push payload', () => {
	it('never passes what push services take, and cuts at whole characters', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'grapheme', maxLength: 6000 }), (body) => {
				const text = payload({
					title: 'Circular 1: D26L01-a',
					body,
					url: '/circulars/1',
					tag: 't'
				});
				expect(Buffer.byteLength(text)).toBeLessThanOrEqual(LARGEST_PUSH_BYTES);
				expect((JSON.parse(text) as { body: string }).body.isWellFormed()).toBe(true);
			})
		);
		const wide = payload({ title: 'T', body: '★'.repeat(5000), url: '/', tag: 't' });
		expect((JSON.parse(wide) as { body: string }).body).toMatch(/^★+…$/);
	});

	it('has a topic that is stable and fits', () => {
		expect(pushTopic('a')).toMatch(/^[A-Za-z0-9_-]{32}$/);
		expect(pushTopic('a')).toBe(pushTopic('a'));
		expect(pushTopic('a')).not.toBe(pushTopic('b'));
	});
});

describe('addresses', () => {
	it.each(['127.0.0.1', '10.0.0.1', '169.254.169.254', '::1', '::ffff:10.0.0.1', 'fe80::1'])(
		'%s is inside',
		(address) => expect(isInsideAddress(address)).toBe(true)
	);
	it.each(['9.9.9.9', '172.32.0.1', '2620:fe::fe', 'push.example.org'])('%s is not', (address) =>
		expect(isInsideAddress(address)).toBe(false)
	);
});

describe('a header value', () => {
	it('stays on one line', () => {
		expect(oneLine('a\r\nBcc: b\u0000c\n')).toBe('a Bcc: b c');
	});
});
