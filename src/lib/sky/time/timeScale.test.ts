import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { icrsOfFk5 } from '../frames/fk5';
import { separationDeg } from '../vector';
import type { Equatorial } from '../angle';
import { barycentreDelayS, geocentreTaiMs } from './barycentre';
import { utcMsOfTai } from './leapSeconds';
import { taiMsOf, tdbMinusTtS, type TimeScale } from './timeScale';

/** Made by astropy 5.2.1 and ERFA: fixtures/scripts/gen_timeframes.py. */
const reference = JSON.parse(readFileSync('fixtures/reference/timeframes.json', 'utf8')) as {
	fk5: { fk5: Equatorial; icrs: Equatorial }[];
	scales: { scale: TimeScale; reading: string; utc: string }[];
	tdb: { tt: string; tdbMinusTtS: number }[];
	bary: { utc: string; position: Equatorial; delayS: number; tdbAtBarycentre: string }[];
};
const readingMs = (text: string) => {
	const [whole, fraction = ''] = text.split('.');
	return Date.parse(`${whole}Z`) + Number(`0.${fraction || 0}`) * 1000;
};

describe('time scales against astropy', () => {
	it.each(reference.scales)('$reading $scale is $utc UTC', ({ scale, reading, utc }) => {
		const utcMs = utcMsOfTai(taiMsOf(scale, readingMs(reading)));
		expect(Math.abs(utcMs - readingMs(utc))).toBeLessThan(0.1);
	});

	it('TDB − TT is within 0.1 ms on every row', () => {
		expect(reference.tdb).toHaveLength(60);
		for (const { tt, tdbMinusTtS: expected } of reference.tdb) {
			expect(Math.abs(tdbMinusTtS(readingMs(tt)) - expected), tt).toBeLessThan(1e-4);
		}
	});

	it('GPS time is 18 s ahead of UTC since 2017 (IS-GPS-200 and IERS Bulletin C 52)', () => {
		const reading = readingMs('2026-12-01T03:41:45');
		expect(utcMsOfTai(taiMsOf('GPS', reading))).toBe(readingMs('2026-12-01T03:41:27'));
	});

	it('a reading inside an inserted second gives the second after it', () => {
		// 2016-12-31T23:59:60.5 UTC is 2017-01-01T00:00:36.5 TAI.
		expect(utcMsOfTai(readingMs('2017-01-01T00:00:36.5'))).toBe(readingMs('2017-01-01T00:00:00.5'));
		expect(utcMsOfTai(readingMs('2017-01-01T00:00:35.5'))).toBe(readingMs('2016-12-31T23:59:59.5'));
	});

	it('refuses what lies before 1988', () => {
		expect(() => taiMsOf('UTC', Date.UTC(1987, 11, 31))).toThrow(RangeError);
		expect(() => utcMsOfTai(Date.UTC(1950, 0, 1))).toThrow(RangeError);
	});
});

describe('light travel to the barycentre against astropy', () => {
	it.each(reference.bary)('$utc at $position.raDeg', (row) => {
		expect(Math.abs(barycentreDelayS(row.position, readingMs(row.utc)) - row.delayS)).toBeLessThan(
			0.01
		);
		const baryTaiMs = taiMsOf('TDB', readingMs(row.tdbAtBarycentre));
		const utcMs = utcMsOfTai(geocentreTaiMs(row.position, baryTaiMs));
		expect(Math.abs(utcMs - readingMs(row.utc))).toBeLessThan(10);
	});
});

describe('FK5 to ICRS against astropy', () => {
	it.each(reference.fk5)('$fk5.raDeg $fk5.decDeg', ({ fk5, icrs }) => {
		expect(separationDeg(icrsOfFk5(fk5), icrs)).toBeLessThan(1e-9);
		// The two frames are tens of milliarcseconds apart: leaving the rotation out would fail.
		expect(separationDeg(fk5, icrs)).toBeGreaterThan(1e-6);
	});
});
