import { describe, expect, it } from 'vitest';
import { formatBytes, reasonTitle, visibleText } from './quarantineWords';

describe('a packet in quarantine', () => {
	it('shows characters that can’t be seen or turn text around', () => {
		expect(visibleText('a\u0000b\u202ec\tδ\n{}')).toBe('a\\u0000b\\u202ec\tδ\n{}');
	});

	it('has a size for people and a reason even for a code nobody knows', () => {
		expect([0, 1, 1023, 1434, 3 * 1024 * 1024].map(formatBytes)).toEqual([
			'0 bytes',
			'1 byte',
			'1023 bytes',
			'1.4 KiB',
			'3 MiB'
		]);
		expect(reasonTitle('invalid')).toContain('not valid');
		expect(reasonTitle('')).not.toBe('');
	});
});
