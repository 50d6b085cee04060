import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readReferenceCsv } from '../../../../tests/unit/readReference';
import { angleBetweenDeg, normalise } from '../vector';
import { altitudeGrid, gridInstants } from './altitudeGrid';
import { evaluateSeries } from './chebyshev';
import { aberrate, apparentVector, instantAt } from './instant';
import { lowSunAltitudeDeg, sunAltitudesByLongitude } from './lowSun';
import { skySpan, targetPlace } from './skySpan';
import { moonKm, skyAt, sunKm } from './sunMoon';

const ARCSEC = 1 / 3600;
const HOUR_MS = 3_600_000;
const START_MS = Date.UTC(2027, 2, 8, 21, 17);

describe('a span against evaluating every instant', () => {
	const span = skySpan(START_MS, START_MS + 26 * HOUR_MS);
	const times = Array.from({ length: 53 }, (_, i) => START_MS + i * HOUR_MS * 0.5);

	it('keeps sidereal time within 0.02 arcseconds', () => {
		const worst = times.map((utcMs) => {
			const straight = span.gastStartRad + (utcMs - START_MS) * span.gastRadPerMs;
			return Math.abs(Math.sin((straight - instantAt(utcMs).gastRad) / 2) * 2);
		});
		expect((Math.max(...worst) * 180) / Math.PI).toBeLessThan(0.02 * ARCSEC);
	});

	it.each([
		['Sun', sunKm, 'sun'],
		['Moon', moonKm, 'moon']
	] as const)('keeps the %s within 0.1 arcseconds', (_, exact, body) => {
		const worst = times.map((utcMs) =>
			angleBetweenDeg(
				normalise(evaluateSeries(span[body], utcMs)),
				normalise(exact(instantAt(utcMs)))
			)
		);
		expect(Math.max(...worst)).toBeLessThan(0.1 * ARCSEC);
	});

	it('holds targets within 0.5 arcseconds of their place at either end', () => {
		for (const raDeg of [0, 77, 181, 266]) {
			const position = { raDeg, decDeg: raDeg / 4 - 30 };
			const held = targetPlace(position, span).direction;
			for (const utcMs of [span.startMs, span.endMs]) {
				const there = apparentVector(position, instantAt(utcMs));
				expect(angleBetweenDeg(held, there)).toBeLessThan(0.5 * ARCSEC);
			}
		}
	});

	it('refuses an empty, backward or overlong span', () => {
		expect(() => skySpan(START_MS, START_MS)).toThrow(RangeError);
		expect(() => skySpan(START_MS, START_MS - 1)).toThrow(RangeError);
		expect(() => skySpan(START_MS, START_MS + 97 * HOUR_MS)).toThrow(/96 h/);
	});
});

describe('the altitude grid', () => {
	it('agrees with astropy within 1 arcsecond on every row', () => {
		let worst = 0;
		for (const row of readReferenceCsv('altaz.csv')) {
			const [altDeg = Number.NaN] = altitudeGrid(
				[{ raDeg: Number(row.ra_deg), decDeg: Number(row.dec_deg) }],
				gridInstants([Date.parse(row.utc ?? '')]),
				{ latDeg: Number(row.lat_deg), lonDeg: Number(row.lon_deg), heightM: Number(row.elev_m) },
				'degrees',
				new Float32Array(1)
			);
			worst = Math.max(worst, Math.abs(altDeg - Number(row.alt_deg)));
		}
		expect(worst).toBeLessThan(ARCSEC);
	});

	it('agrees with single evaluations over a day, to the zenith and the nadir', () => {
		const site = { latDeg: 28.3, lonDeg: -16.5, heightM: 2390 };
		const times = Array.from({ length: 97 }, (_, i) => START_MS + i * 900_000);
		const positions = [0, 60, 190, 300].flatMap((raDeg) =>
			[-90, -28.3, 0, 28.29, 28.3, 90].map((decDeg) => ({ raDeg, decDeg }))
		);
		const grid = altitudeGrid(
			positions,
			gridInstants(times),
			site,
			'degrees',
			new Float64Array(positions.length * times.length)
		);
		let worst = 0;
		positions.forEach((position, i) =>
			times.forEach((utcMs, j) => {
				const { altDeg } = skyAt(site, utcMs, position).target;
				worst = Math.max(worst, Math.abs(altDeg - grid[i * times.length + j]!));
			})
		);
		expect(worst).toBeLessThan(0.1 * ARCSEC);
	});

	it('refuses times out of order and too small an output', () => {
		expect(() => gridInstants([2, 1])).toThrow(RangeError);
		expect(() =>
			altitudeGrid(
				[{ raDeg: 0, decDeg: 0 }],
				gridInstants([1, 2]),
				{ latDeg: 0, lonDeg: 0, heightM: 0 },
				'sine',
				new Float32Array(1)
			)
		).toThrow(/at least 2/);
	});
});

describe('aberration', () => {
	it('keeps unit length and never exceeds 20.6 arcseconds', () => {
		const { velocity } = instantAt(START_MS);
		fc.assert(
			fc.property(
				fc.double({ min: -1, max: 1, noNaN: true }),
				fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }),
				(z, angle) => {
					const r = Math.sqrt(1 - z * z);
					const star = { x: r * Math.cos(angle), y: r * Math.sin(angle), z };
					const moved = aberrate(star, velocity);
					expect(Math.hypot(moved.x, moved.y, moved.z)).toBeCloseTo(1, 12);
					expect(angleBetweenDeg(star, moved)).toBeLessThan(20.9 * ARCSEC);
				}
			)
		);
	});
});

describe('the low-cost Sun', () => {
	it('stays within 0.02 degrees of astropy on every row', () => {
		const worst = readReferenceCsv('altaz.csv').map((row) =>
			Math.abs(
				lowSunAltitudeDeg(Date.parse(row.utc ?? ''), {
					latDeg: Number(row.lat_deg),
					lonDeg: Number(row.lon_deg)
				}) - Number(row.sun_alt_deg)
			)
		);
		expect(Math.max(...worst)).toBeLessThan(0.02);
	});

	it('shades longitudes from day to night', () => {
		const columns = sunAltitudesByLongitude(Date.UTC(2027, 2, 20, 12), 0, 360);
		expect(columns).toHaveLength(360);
		expect(columns[180]?.band).toBe('day');
		expect(columns[0]?.band).toBe('night');
		expect(new Set(columns.map(({ band }) => band)).size).toBe(5);
	});
});
