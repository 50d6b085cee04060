import { describe, expect, it } from 'vitest';
import { fromUtcInput, toUtcInput, UTC_INPUT } from './utcInput';

describe('utcInput', () => {
	const utcMs = Date.parse('2026-12-01T04:12:00Z');
	it('goes there and back', () => {
		expect(toUtcInput(utcMs)).toBe('2026-12-01 04:12');
		expect(fromUtcInput(toUtcInput(utcMs))).toBe(utcMs);
	});
	it('takes a T and spaces around', () => {
		expect(fromUtcInput(' 2026-12-01T04:12 ')).toBe(utcMs);
	});
	it.each(['', '04:12', '2026-06-31 04:12', '2026-12-01 24:30', '2026-12-01 4:12'])(
		'answers NaN to %j',
		(text) => expect(fromUtcInput(text)).toBeNaN()
	);
	it('has a pattern that fits what it shows', () => {
		expect(toUtcInput(utcMs)).toMatch(new RegExp(`^${UTC_INPUT.pattern}$`));
	});
});
