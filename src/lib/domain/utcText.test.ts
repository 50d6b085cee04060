import { describe, expect, it } from 'vitest';
import { isoFromUtcText } from './utcText';

describe('a time as people write it', () => {
	it.each([
		['2026-12-01 03:41:27', '2026-12-01T03:41:27Z'],
		[' 2026-12-01T03:41:27.25Z ', '2026-12-01T03:41:27.25Z'],
		['2026-12-01 03:41:27 UT', '2026-12-01T03:41:27Z'],
		['2026-12-01  03:41 UTC', '2026-12-01T03:41Z'],
		['2026-12-01T05:41:27+02:00', '2026-12-01T05:41:27+02:00'],
		['2026-12-01T05:41:27+0200', '2026-12-01T05:41:27+02:00'],
		['2026-12-01 05:41:27 +02', '2026-12-01T05:41:27+02:00']
	])('%j is %s', (text, iso) => {
		expect(isoFromUtcText(text)).toBe(iso);
	});

	it.each(['', '03:41:27', '2026-12-01', '01.12.2026 03:41', '2026-12-01 03:41:27 CET', 'now'])(
		'%j can’t be read',
		(text) => {
			expect(isoFromUtcText(text)).toBeNull();
		}
	);
});
