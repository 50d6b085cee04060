import { describe, expect, it } from 'vitest';
import { formatPosition, positionToPaste } from './formatPosition';

describe('formatPosition', () => {
	it('drops decimals that a wide region does not carry', () => {
		expect(formatPosition({ raDeg: 83.4, decDeg: -8.2 }, 0.6)).toEqual({
			ra: '05h33m36s',
			dec: '−08°12′00″'
		});
	});
	it('keeps decimals for arcseconds', () => {
		expect(formatPosition({ raDeg: 83.401, decDeg: 8.2001 }, 3 / 3600)).toEqual({
			ra: '05h33m36.24s',
			dec: '+08°12′00.4″'
		});
	});
});

describe('positionToPaste', () => {
	it('is plain ASCII with colons', () => {
		expect(positionToPaste({ raDeg: 83.4, decDeg: -8.2 })).toBe('05:33:36.0 -08:12:00');
	});
});
