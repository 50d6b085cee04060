import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Equatorial, Site } from '../angle';
import { arbitraryPosition } from '../testing/arbitraryPosition';
import { visibilityBetween } from './visibilityOf';
import type { Closure, TelescopeLimits, Window } from './telescope';

const START_MS = Date.UTC(2026, 11, 1, 4, 12);
const DAY_MS = 86_400_000;

const limits: TelescopeLimits = {
	sunAltMaxDeg: -12,
	minAltDeg: 25,
	maxAltDeg: 86,
	horizon: [
		{ azDeg: 20, altDeg: 30 },
		{ azDeg: 110, altDeg: 10 },
		{ azDeg: 300, altDeg: 40 }
	],
	hourAngleMaxH: 5,
	decMinDeg: null,
	decMaxDeg: null,
	moonDistanceDeg: 50,
	sunDistanceDeg: 45
};
const closures: Closure[] = [
	{ startMs: START_MS + 3_600_000, endMs: START_MS + 5_400_000, reason: 'wind' },
	{ startMs: START_MS + 40_000_000, endMs: START_MS + 43_000_000, reason: 'mirror' },
	{ startMs: START_MS + 42_000_000, endMs: START_MS + 44_000_000, reason: 'visitors' }
];

const sites: fc.Arbitrary<Site> = fc.record({
	latDeg: fc.oneof(
		fc.constantFrom(-90, -66.5, 0, 66.5, 90),
		fc.double({ min: -90, max: 90, noNaN: true })
	),
	lonDeg: fc.oneof(
		fc.constantFrom(-180, -179.9999, 0, 179.9999, 180),
		fc.double({ min: -180, max: 180, noNaN: true })
	),
	heightM: fc.double({ min: 0, max: 5000, noNaN: true })
});

const windowsAt = (site: Site, position: Equatorial, change: Partial<TelescopeLimits> = {}) =>
	visibilityBetween(
		{ site, limits: { ...limits, ...change }, closures },
		position,
		START_MS,
		START_MS + DAY_MS
	).windows;

/** The same windows, their edges within 0.2 s: what rounding may do where a limit is barely reached. */
function expectSame(a: readonly Window[], b: readonly Window[]): void {
	expect(a.map(({ opensBy, endsBy }) => [opensBy, endsBy])).toEqual(
		b.map(({ opensBy, endsBy }) => [opensBy, endsBy])
	);
	a.forEach((window, i) => {
		expect(Math.abs(window.startMs - b[i]!.startMs)).toBeLessThan(200);
		expect(Math.abs(window.endMs - b[i]!.endMs)).toBeLessThan(200);
	});
}

describe('windows', () => {
	it('are the same for right ascensions and longitudes a turn further, poles and dateline included', () => {
		fc.assert(
			fc.property(sites, arbitraryPosition, (site, position) => {
				const windows = windowsAt(site, position);
				expectSame(windowsAt(site, { ...position, raDeg: position.raDeg + 360 }), windows);
				const lonDeg = site.lonDeg > 0 ? site.lonDeg - 360 : site.lonDeg + 360;
				expectSame(windowsAt({ ...site, lonDeg }, position), windows);
			}),
			{ numRuns: 60 }
		);
	});

	it('do not depend on the order of closures', () => {
		fc.assert(
			fc.property(sites, arbitraryPosition, (site, position) => {
				const reversed = visibilityBetween(
					{ site, limits, closures: [...closures].reverse() },
					position,
					START_MS,
					START_MS + DAY_MS
				);
				expect(reversed.windows).toEqual(windowsAt(site, position));
			}),
			{ numRuns: 40 }
		);
	});

	it('lie inside the windows of any looser limit, in order and apart', () => {
		const looser: Partial<TelescopeLimits>[] = [
			{ sunAltMaxDeg: -6 },
			{ minAltDeg: 15 },
			{ maxAltDeg: null },
			{ horizon: null },
			{ hourAngleMaxH: null },
			{ moonDistanceDeg: 20 },
			{ sunDistanceDeg: 30 }
		];
		fc.assert(
			fc.property(
				sites,
				arbitraryPosition,
				fc.constantFrom(...looser),
				(site, position, change) => {
					const tight = windowsAt(site, position);
					const loose = windowsAt(site, position, change);
					for (const { startMs, endMs } of tight) {
						const holds = loose.some((w) => w.startMs <= startMs + 200 && w.endMs >= endMs - 200);
						expect(holds).toBe(true);
					}
					for (let i = 1; i < tight.length; i++) {
						expect(tight[i]!.startMs - tight[i - 1]!.endMs).toBeGreaterThan(1000);
					}
				}
			),
			{ numRuns: 80 }
		);
	});
});
