import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sexagesimal } from './sexagesimal';

/** Reads the three fields back as a number of the first one's unit. */
function read(text: string): number {
	const [a = '', b = '', c = ''] = text.replace(/^[+-]/, '').split(' ');
	return (text.startsWith('-') ? -1 : 1) * (Number(a) + Number(b) / 60 + Number(c) / 3600);
}

describe('sexagesimal', () => {
	it('writes a worked example (Meeus, Astronomical Algorithms, ch. 1: α = 9h 14m 55.8s)', () => {
		expect(sexagesimal({ raDeg: 138.7325, decDeg: 0 }).ra).toBe('09 14 55.8');
		expect(sexagesimal({ raDeg: 138.7325, decDeg: -8.2008 }, 1)).toEqual({
			ra: '09 14 55.80',
			dec: '-08 12 02.9'
		});
	});

	it('keeps the sign of a declination between 0 and -1 degree, and shows none for zero', () => {
		expect(sexagesimal({ raDeg: 0, decDeg: -0.5 }).dec).toBe('-00 30 00');
		expect(sexagesimal({ raDeg: 0, decDeg: -1e-9 }).dec).toBe('+00 00 00');
	});

	it('carries at the end of the day and never shows sixty', () => {
		expect(sexagesimal({ raDeg: 359.999999, decDeg: 89.9999999 })).toEqual({
			ra: '00 00 00.0',
			dec: '+90 00 00'
		});
		fc.assert(
			fc.property(
				fc.double({ min: 0, max: 360, maxExcluded: true, noNaN: true }),
				fc.double({ min: -90, max: 90, noNaN: true }),
				fc.integer({ min: 0, max: 3 }),
				(raDeg, decDeg, digits) => {
					const { ra, dec } = sexagesimal({ raDeg, decDeg }, digits);
					expect(`${ra} ${dec}`).not.toMatch(/ 60/);
					const raError = Math.abs(((read(ra) * 15 - raDeg + 540) % 360) - 180) * 3600;
					expect(raError).toBeLessThanOrEqual(0.76 * 10 ** -digits);
					expect(Math.abs(read(dec) - decDeg) * 3600).toBeLessThanOrEqual(0.51 * 10 ** -digits);
				}
			)
		);
	});
});
