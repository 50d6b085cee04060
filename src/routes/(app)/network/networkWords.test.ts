import { expect, test } from 'vitest';
import { formatAreaDeg2, formatLat, formatLon, formatSpan } from './networkWords';

test('places say their hemisphere instead of a sign', () => {
	expect([formatLat(-28.314), formatLat(69.61), formatLon(-69.92), formatLon(20.3)]).toEqual([
		'28.31° S',
		'69.61° N',
		'69.92° W',
		'20.30° E'
	]);
});

test('fields keep two figures from arcminutes to tens of degrees', () => {
	expect([0.0616, 0.5625, 3.61, 47.2].map(formatAreaDeg2)).toEqual([
		'0.062 deg²',
		'0.56 deg²',
		'3.6 deg²',
		'47 deg²'
	]);
});

test('spans are in the unit that suits them', () => {
	const HOUR_MS = 3_600_000;
	expect([0.75, 8, 7.5, 47, 72].map((hours) => formatSpan(hours * HOUR_MS))).toEqual([
		'45 min',
		'8 h',
		'7.5 h',
		'47 h',
		'3 d'
	]);
});
