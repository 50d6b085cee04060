import { describe, expect, it } from 'vitest';
import { readReferenceCsv, readReferenceJson } from '../../../../tests/unit/readReference';
import { airmass } from './airmass';
import {
	darkSkyNanolambert,
	magPerArcsec2,
	moonBrighteningMag,
	moonlightNanolambert
} from './moonlight';
import { sharedSky, siteSky, sunAltitudeDeg } from './siteSky';
import type { TelescopeLimits } from './telescope';
import { sunCrossings } from './twilight';
import { visibilityBetween } from './visibilityOf';

const DAY_MS = 86_400_000;

describe('twilight against astropy 5.2.1', () => {
	const thresholds = [
		['sunset', 'sunrise', 'sun_state', -0.8333],
		['civil_dusk', 'civil_dawn', 'civil_state', -6],
		['nautical_dusk', 'nautical_dawn', 'nautical_state', -12],
		['astro_dusk', 'astro_dawn', 'astro_state', -18]
	] as const;
	const rows = readReferenceCsv('twilight.csv');

	it('reads all 216 rows', () => {
		expect(rows).toHaveLength(216);
	});

	it.each(rows.map((row) => [`${row.site} ${row.date}`, row] as const))(
		'finds every crossing and no other: %s',
		(_, row) => {
			const latDeg = Number(row.lat_deg);
			const startMs = Date.parse(row.window_start ?? '');
			const shared = sharedSky(startMs, startMs + DAY_MS);
			const sky = siteSky(
				{ latDeg, lonDeg: Number(row.lon_deg), heightM: Number(row.elev_m) },
				shared
			);
			for (const [dusk, dawn, state, altDeg] of thresholds) {
				const crossings = sunCrossings(sky, altDeg);
				const first = crossings.find(({ direction }) => direction === 'down');
				const then = crossings.find(
					({ direction, utcMs }) => direction === 'up' && (!first || utcMs > first.utcMs)
				);
				for (const [found, text] of [
					[first, row[dusk]],
					[then, row[dawn]]
				] as const) {
					expect(found === undefined).toBe(text === '');
					if (!found || !text) continue;
					const expectedMs = Date.parse(text);
					if (Math.abs(latDeg) < 60) {
						expect(Math.abs(found.utcMs - expectedMs)).toBeLessThan(2500);
					} else {
						// Where the Sun grazes the limit, 2″ of altitude.
						expect(Math.abs(sunAltitudeDeg(sky, expectedMs) - altDeg)).toBeLessThan(2 / 3600);
					}
				}
				const count = Number(/^(\d+) crossings/.exec(row[state] ?? '')?.[1] ?? 0);
				expect(crossings).toHaveLength(count);
				if (count === 0) expect(sunAltitudeDeg(sky, startMs) > altDeg).toBe(row[state] === 'above');
			}
		}
	);
});

describe('windows against astropy 5.2.1', () => {
	const limits: TelescopeLimits = {
		sunAltMaxDeg: -12,
		minAltDeg: 30,
		maxAltDeg: null,
		horizon: null,
		hourAngleMaxH: null,
		decMinDeg: null,
		decMaxDeg: null,
		moonDistanceDeg: 20,
		sunDistanceDeg: 0
	};
	const names: Record<string, string> = { target: 'altitude' };
	const named = (limit: string | undefined) => names[limit ?? ''] ?? limit ?? '';
	const rows = readReferenceCsv('windows.csv');

	it('reads all 60 rows', () => {
		expect(rows).toHaveLength(60);
	});

	it.each(rows.map((row) => [`${row.site} ${row.t0}`, row] as const))(
		'finds every interval and what ends it: %s',
		(_, row) => {
			const startMs = Date.parse(row.t0 ?? '');
			const latDeg = Number(row.lat_deg);
			const answer = visibilityBetween(
				{
					site: { latDeg, lonDeg: Number(row.lon_deg), heightM: Number(row.elev_m) },
					limits,
					closures: []
				},
				{ raDeg: Number(row.ra_deg), decDeg: Number(row.dec_deg) },
				startMs,
				startMs + DAY_MS,
				'plain'
			);
			expect(answer.windows).toHaveLength(Number(row.n_intervals));
			const toleranceMs = (limit: string) => (limit === 'moon' ? 30_000 : 2500);
			const expected = (row.intervals ?? '').split(';').filter((text) => text !== '');
			answer.windows.forEach((window, i) => {
				const [from = '', to = ''] = (expected[i] ?? '').split('/');
				expect(Math.abs(window.startMs - Date.parse(from))).toBeLessThan(
					toleranceMs(window.opensBy)
				);
				expect(Math.abs(window.endMs - Date.parse(to))).toBeLessThan(toleranceMs(window.endsBy));
			});
			const [first] = answer.windows;
			if (answer.verdict === 'neverUp') {
				if (row.none_reason !== 'never together') {
					expect(answer.forbidden.limit).toBe(named(row.none_reason));
				}
			} else {
				expect(first?.opensBy).toBe(named(row.first_limit));
				expect(answer.windows.at(-1)?.endsBy).toBe(named(row.last_limit));
			}
		}
	);
});

describe('airmass and moonlight against their formulas evaluated in Python', () => {
	it('matches Kasten and Young 1989 on all 38 altitudes', () => {
		const { rows } = readReferenceJson<{
			rows: { alt_deg: number; kasten_young_1989: number }[];
		}>('airmass.json');
		expect(rows).toHaveLength(38);
		for (const row of rows) expect(airmass(row.alt_deg)).toBeCloseTo(row.kasten_young_1989, 9);
		expect(airmass(-0.01)).toBeNull();
	});

	it('stays within 1 % of the tabulated airmass of Bemporad 1904, 2 % below 5°', () => {
		// As printed in handbooks (Allen, Astrophysical Quantities); zenith distance and airmass from memory.
		const table = { 60: 1.995, 70: 2.904, 75: 3.816, 80: 5.6, 85: 10.395, 87: 15.365, 88: 19.787 };
		for (const [zenithDeg, tabulated] of Object.entries(table)) {
			const share = (airmass(90 - Number(zenithDeg)) ?? 0) / tabulated;
			expect(Math.abs(share - 1)).toBeLessThan(Number(zenithDeg) > 85 ? 0.02 : 0.01);
		}
	});

	it('matches Krisciunas and Schaefer 1991 on all 35 geometries', () => {
		const { rows } = readReferenceJson<{ rows: Record<string, number>[] }>('fade.json');
		expect(rows).toHaveLength(35);
		for (const row of rows) {
			const moon = {
				phaseAngleDeg: row.alpha_deg!,
				distanceDeg: row.rho_deg!,
				targetZenithDeg: row.z_sky_deg!,
				moonZenithDeg: row.z_moon_deg!
			};
			const moonlight = moonlightNanolambert(moon, row.k_mag!);
			const dark = darkSkyNanolambert(row.z_sky_deg!, row.k_mag!, row.B_zen_nL!);
			expect(moonlight / row.B_moon_nL!).toBeCloseTo(1, 9);
			expect(dark / row.B_dark_nL!).toBeCloseTo(1, 9);
			expect(magPerArcsec2(moonlight + dark)).toBeCloseTo(row.V_moonlit!, 9);
			const brightening = moonBrighteningMag(moon, row.k_mag!, magPerArcsec2(row.B_zen_nL!));
			expect(brightening).toBeCloseTo(-row.delta_V!, 6);
		}
	});

	it('prints 19.855 for the case that published code prints', () => {
		const moonlight = moonlightNanolambert(
			{ phaseAngleDeg: 45, distanceDeg: 50, targetZenithDeg: 20, moonZenithDeg: 70 },
			0.15
		);
		expect(magPerArcsec2(moonlight)).toBeCloseTo(19.855, 3);
	});
});
