import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { arcsecDigitsFor, formatPosition, parsePosition } from './positionText';
import { arbitraryPosition } from './testing/arbitraryPosition';
import { separationDeg } from './vector';

describe('writing a position', () => {
	it('uses the usual marks', () => {
		expect(formatPosition({ raDeg: 83.4, decDeg: -8.2 })).toEqual({
			ra: '05h33m36s',
			dec: '−08°12′00″'
		});
		expect(formatPosition({ raDeg: 83.4, decDeg: 8.2 }, 1)).toEqual({
			ra: '05h33m36.00s',
			dec: '+08°12′00.0″'
		});
	});

	it('never shows sixty and wraps at the end of the day', () => {
		expect(formatPosition({ raDeg: 359.99999, decDeg: 59.999999 })).toEqual({
			ra: '00h00m00s',
			dec: '+60°00′00″'
		});
	});

	it('gives as many decimals as the radius deserves', () => {
		expect([3, 2 / 60, 2 / 3600, 0.1 / 3600, 1e-9, NaN].map(arcsecDigitsFor)).toEqual([
			0, 0, 1, 2, 4, 0
		]);
	});
});

describe('reading a position', () => {
	it.each([
		'05h33m36s −08°12′00″',
		'05h33m36s-08d12m00s',
		'05:33:36.0, -8:12:00',
		'05 33 36 -08 12 00',
		'83.4 -8.2',
		'  RA 83.4° Dec -8.2° ',
		'RA=83.4, Dec=−8.2 (J2000)',
		'5.56h -8.2',
		'05h33.6m -08°12′'
	])('understands %s', (text) => {
		const position = parsePosition(text);
		expect(position?.raDeg).toBeCloseTo(83.4, 9);
		expect(position?.decDeg).toBeCloseTo(-8.2, 9);
	});

	it('keeps the sign of a declination just below 0', () => {
		expect(parsePosition('05:33:36 -00:12:00')?.decDeg).toBeCloseTo(-0.2, 12);
		expect(parsePosition('83.4 0.2')?.decDeg).toBeCloseTo(0.2, 12);
	});

	it.each([
		'',
		'junk',
		'83.4',
		'05h33m36s',
		'-83.4 8.2',
		'400 2',
		'10 91',
		'25h 10',
		'05 61 00 +01 00 00',
		'05 33 36 08 12',
		'83.4 8.2 9',
		'5.5 30 +10 10',
		'83.4x 8.2'
	])('gives nothing for %j', (text) => {
		expect(parsePosition(text)).toBeNull();
	});

	it('reads back what it writes', () => {
		fc.assert(
			fc.property(arbitraryPosition, fc.integer({ min: 0, max: 4 }), (position, digits) => {
				const { ra, dec } = formatPosition(position, digits);
				const back = parsePosition(`${ra} ${dec}`);
				if (!back) throw new Error(`${ra} ${dec} was not read`);
				// Right ascension without decimals is good to half a second of time, 7.5″.
				const limitArcsec = digits === 0 ? 7.6 : 0.8 * 10 ** -digits;
				expect(separationDeg(back, position) * 3600).toBeLessThan(limitArcsec + 1e-9);
			})
		);
	});
});
