import { describe, expect, it } from 'vitest';
import {
	formatAngle,
	formatArea,
	formatChance,
	formatOdds,
	formatPoints,
	formatShare
} from './formatQuantity';

describe('formatArea', () => {
	it.each([
		[1.2068, '1.21 deg²'],
		[28.31, '28.3 deg²'],
		[310.2, '310 deg²'],
		[0.0234, '0.0234 deg²'],
		[0.00234, '8.42 arcmin²'],
		[5e-6, '64.8 arcsec²']
	])('shows %d deg² as %s', (areaDeg2, text) => expect(formatArea(areaDeg2)).toBe(text));
});

describe('formatAngle', () => {
	it.each([
		[3.1, '3.1°'],
		[12.4, '12°'],
		[0.035, '2.1′'],
		[0.00125, '4.5″']
	])('shows %d° as %s', (angleDeg, text) => expect(formatAngle(angleDeg)).toBe(text));
});

describe('formatOdds', () => {
	it.each([
		[Math.log(310), 'yes', '310 : 1'],
		[Math.log(10), 'yes', '10 : 1'],
		[Math.log(3), 'unsure', '3.0 : 1'],
		[-Math.log(3), 'unsure', '1 : 3.0'],
		[-Math.log(250), 'no', '1 : 250'],
		[21, 'yes', '10⁹ : 1'],
		[-900, 'no', '1 : 10³⁹⁰']
	])('says %d as %s, %s', (logOdds, verdict, ratio) =>
		expect(formatOdds(logOdds)).toEqual({ verdict, ratio })
	);
});

describe('chances and shares', () => {
	it('never claims certainty or impossibility by rounding', () => {
		expect(formatChance(0.998)).toBe('>0.99');
		expect(formatChance(0.001)).toBe('<0.01');
		expect(formatChance(0.634)).toBe('0.63');
		expect(formatShare(0.998)).toBe('>99%');
		expect(formatShare(0.001)).toBe('<1%');
		expect(formatShare(0)).toBe('0%');
	});
});

describe('formatPoints', () => {
	it('counts in plain words', () => {
		expect(formatPoints(20.6)).toBe('21 points');
		expect(formatPoints(1.2)).toBe('1 point');
		expect(formatPoints(0.3)).toBe('less than 1 point');
		expect(formatPoints(0)).toBe('nothing');
	});
});
