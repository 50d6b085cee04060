import { expect, it } from 'vitest';
import { lagText, shortDay } from './healthWords';

it('a lag has the unit that suits it', () => {
	expect([0.4, 12.3, 99.4, 99.6, 300, 7560, 200_000, -3].map(lagText)).toEqual([
		'0.4 s',
		'12 s',
		'99 s',
		'1.7 min',
		'5 min',
		'2.1 h',
		'2.3 d',
		'−3 s'
	]);
});

it('a day is short', () => {
	expect(shortDay('2026-12-01')).toBe('1');
});
