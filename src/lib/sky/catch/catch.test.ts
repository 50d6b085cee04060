import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { RegionPoints } from '../regions/jointRegion';
import { regionSample } from '../tiling/regionSample';
import type { RegionTile } from '../tiling/tilesFor';
import { sharedSky, siteSky, skyTarget } from '../visibility/siteSky';
import { targetWindows, telescopeNights } from '../visibility/targetWindows';
import type { Depth, Detector } from '../visibility/telescope';
import { limitMag } from './depth';
import { DEFAULT_FADE, detectChance, fadeMag, normalCdf } from './fade';
import { networkCatch } from './networkCatch';
import { notFoundUpdate, type NotFound } from './notFoundUpdate';
import { planCatch, tilePlan } from './tilePlan';

const HOUR_MS = 3_600_000;
const depth: Depth = {
	filter: 'R',
	refLimitMag: 20,
	refExposureS: 60,
	floorMag: 22,
	extinctionMag: 0.1,
	darkSkyMag: 21.5
};

describe('the fade', () => {
	it('is the mean at one hour and 3.45 magnitudes fainter after a day at α = 1', () => {
		expect(fadeMag(DEFAULT_FADE, 0, HOUR_MS)).toBeCloseTo(22.2, 12);
		// methods_reference.txt: 1 h to 1 d, α = 1.
		expect(fadeMag(DEFAULT_FADE, 0, 24 * HOUR_MS) - 22.2).toBeCloseTo(3.4505281042790155, 9);
	});

	it('leaves 71 percent brighter than R = 22.1 at 1000 seconds, as the published sample', () => {
		expect(detectChance(DEFAULT_FADE, 0, 1_000_000, 22.1)).toBeCloseTo(0.71, 1);
	});

	it('stays finite before and at the trigger', () => {
		expect(Number.isFinite(fadeMag(DEFAULT_FADE, 0, -5))).toBe(true);
		expect(detectChance({ ...DEFAULT_FADE, m1Spread: 0 }, 0, HOUR_MS, 22.3)).toBe(1);
	});

	it('uses the normal distribution of the tables', () => {
		// From tables, from memory.
		for (const [x, p] of [
			[0, 0.5],
			[1, 0.8413447],
			[1.959964, 0.975],
			[-1.644854, 0.05]
		] as const) {
			expect(normalCdf(x)).toBeCloseTo(p, 6);
		}
	});
});

describe('the depth', () => {
	it('gains 0.7526 magnitudes by four times the exposure', () => {
		// methods_reference.txt: 1.25 log10(4).
		const gained = limitMag(depth, 240, 90, null) - limitMag(depth, 60, 90, null);
		expect(gained).toBeCloseTo(0.752574989159953, 9);
	});

	it('loses the extinction of the airmass and half the brightening by the Moon', () => {
		expect(limitMag(depth, 60, 30, null)).toBeCloseTo(20 - 0.1 * 0.9943, 3);
		const moonlit = limitMag(depth, 60, 60, {
			phaseAngleDeg: 0,
			distanceDeg: 30,
			targetZenithDeg: 30,
			moonZenithDeg: 40
		});
		expect(moonlit).toBeLessThan(limitMag(depth, 60, 60, null) - 1);
	});

	it('never passes the floor and has no limit below the horizon', () => {
		expect(limitMag(depth, 1e6, 90, null)).toBe(22);
		expect(limitMag(depth, 60, -1, null)).toBe(-Infinity);
	});
});

describe('a tile plan', () => {
	const startMs = Date.UTC(2026, 11, 1, 0);
	const shared = sharedSky(startMs, startMs + 24 * HOUR_MS);
	const pointing = {
		site: { latDeg: -30, lonDeg: -70, heightM: 2000 },
		limits: {
			sunAltMaxDeg: -12,
			minAltDeg: 25,
			maxAltDeg: null,
			horizon: null,
			hourAngleMaxH: null,
			decMinDeg: null,
			decMaxDeg: null,
			moonDistanceDeg: 0,
			sunDistanceDeg: 0
		},
		closures: []
	};
	const telescope = telescopeNights(
		pointing,
		siteSky(pointing.site, shared),
		startMs,
		startMs + 24 * HOUR_MS
	);
	const tileAt = (raDeg: number, probability: number) => {
		const centre = { raDeg, decDeg: -30 };
		const tile: RegionTile = {
			centre,
			rotationDeg: 0,
			probability,
			members: Int32Array.of(0),
			parts: Float64Array.of(probability)
		};
		const target = skyTarget(centre, shared);
		return { tile, target, windows: targetWindows(telescope, target) };
	};
	const plan = (tiles: ReturnType<typeof tileAt>[], fromMs = startMs, maxTiles = 10) =>
		tilePlan({
			telescope,
			spec: { depth, exposureS: 300, overheadS: 60, maxTiles },
			tiles,
			fromMs,
			t0Ms: startMs - HOUR_MS,
			fade: DEFAULT_FADE
		});

	it('takes the most probable visible tile first, exposures and overheads apart', () => {
		const steps = plan([tileAt(75, 0.2), tileAt(76, 0.5), tileAt(77, 0.3)]);
		expect(steps.map(({ probability }) => probability)).toEqual([0.5, 0.3, 0.2]);
		expect(steps[1]!.startMs - steps[0]!.startMs).toBe(360_000);
		expect(planCatch(steps)).toBeCloseTo(
			steps.reduce((sum, step) => sum + step.probability * step.detectChance, 0),
			12
		);
	});

	it('takes what sets first among equals', () => {
		// Both near the meridian, so that their depths and gains are the same within the tie.
		const earlier = tileAt(40, 0.4);
		const later = tileAt(43, 0.4);
		const steps = plan([later, earlier], Date.UTC(2026, 11, 1, 2, 50));
		expect(steps[0]!.centre.raDeg).toBe(40);
	});

	it('keeps every exposure inside its own tile’s window and waits for the next opening', () => {
		const steps = plan([tileAt(20, 0.5), tileAt(150, 0.5)]);
		expect(steps).toHaveLength(2);
		for (const step of steps) {
			const { windows } = [tileAt(20, 0.5), tileAt(150, 0.5)].find(
				({ tile }) => tile.centre.raDeg === step.centre.raDeg
			)!;
			const endMs = step.startMs + step.exposureS * 1000;
			expect(windows.some((w) => w.startMs <= step.startMs + 1 && w.endMs >= endMs - 1)).toBe(true);
		}
		expect(steps[1]!.startMs - steps[0]!.startMs).toBeGreaterThan(HOUR_MS);
	});

	it('holds no more tiles than allowed and nothing when nothing is up', () => {
		expect(plan([tileAt(75, 0.2), tileAt(76, 0.5)], startMs, 1)).toHaveLength(1);
		expect(plan([tileAt(250, 0.2)].map((t) => ({ ...t, windows: [] })))).toHaveLength(0);
	});
});

describe('the catch of the network', () => {
	const points = (count: number): RegionPoints => ({
		raDeg: Array.from({ length: count }, (_, i) => 10 + i),
		decDeg: Array.from({ length: count }, () => 0),
		probability: Array.from({ length: count }, () => 1 / count)
	});
	const region = regionSample(points(4));

	it('counts sky seen twice once, at its better chance', () => {
		const { catch: total, order } = networkCatch(
			[
				{ telescopeId: 'a', chances: Float64Array.of(0.8, 0.8, 0, 0) },
				{ telescopeId: 'b', chances: Float64Array.of(0.4, 0.9, 0.4, 0) },
				{ telescopeId: 'c', chances: Float64Array.of(0.1, 0.1, 0, 0) }
			],
			region
		);
		expect(total).toBeCloseTo((0.8 + 0.9 + 0.4) / 4, 12);
		expect(order.map(({ telescopeId }) => telescopeId)).toEqual(['b', 'a']);
		expect(order[1]!.gain).toBeCloseTo(0.4 / 4, 12);
	});

	it('is never below 1 − 1/e of the best choice of two', () => {
		const chance = fc.double({ min: 0, max: 1, noNaN: true });
		fc.assert(
			fc.property(
				fc.array(fc.tuple(chance, chance, chance, chance), { minLength: 2, maxLength: 6 }),
				(rows) => {
					const telescopes = rows.map((row, i) => ({
						telescopeId: `t${i}`,
						chances: Float64Array.from(row)
					}));
					const greedy = networkCatch(telescopes, region)
						.order.slice(0, 2)
						.reduce((sum, { gain }) => sum + gain, 0);
					let best = 0;
					for (const a of telescopes) {
						for (const b of telescopes) {
							const both = a.chances.reduce((sum, c, i) => sum + Math.max(c, b.chances[i]!) / 4, 0);
							best = Math.max(best, both);
						}
					}
					expect(greedy).toBeGreaterThanOrEqual((1 - 1 / Math.E) * best - 1e-5);
				}
			)
		);
	});
});

describe('looking and not finding', () => {
	const detectors: Detector[] = [
		{ shape: 'rectangle', widthDeg: 3, heightDeg: 3, rotationDeg: 0, offsetXDeg: 0, offsetYDeg: 0 }
	];
	const region: RegionPoints = {
		raDeg: [10, 11, 20, 21],
		decDeg: [0, 0, 0, 0],
		probability: [0.25, 0.25, 0.25, 0.25]
	};
	const look = (raDeg: number, limit: number): NotFound => ({
		tiles: [{ centre: { raDeg, decDeg: 0 }, rotationDeg: 0 }],
		detectors,
		limitMag: limit,
		atMs: HOUR_MS
	});

	it('takes 1 − 0.9 Pr(detect) of the density in the footprint and renormalises', () => {
		// At the mean magnitude Pr(detect) is one half: 0.55 of what was there stays.
		const after = notFoundUpdate(region, [look(10.5, 22.2)], 0, DEFAULT_FADE);
		const inside = 0.55 / (0.55 * 2 + 2);
		expect(after.points.probability[0]).toBeCloseTo(inside, 7);
		expect(after.points.probability[3]).toBeCloseTo(1 / (0.55 * 2 + 2), 7);
		expect(after.nothingChance).toBeCloseTo((0.55 * 2 + 2) / 4, 7);
		expect(after.tooFaintChance).toBeCloseTo(0.25 / ((0.55 * 2 + 2) / 4), 7);
		expect(after.points.probability.reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 12);
	});

	it('does not depend on the order, and withdrawing a report restores what was', () => {
		const [a, b] = [look(10.5, 21), look(20.5, 24)];
		const ab = notFoundUpdate(region, [a, b], 0, DEFAULT_FADE);
		const ba = notFoundUpdate(region, [b, a], 0, DEFAULT_FADE);
		ab.points.probability.forEach((p, i) => expect(p).toBeCloseTo(ba.points.probability[i]!, 12));
		const without = notFoundUpdate(region, [], 0, DEFAULT_FADE);
		expect(without.points.probability).toEqual(region.probability);
		expect(without.tooFaintChance).toBe(0);
	});

	it('keeps the region when the reports rule out everything', () => {
		const sure = {
			...look(15, 40),
			detectors: [{ ...detectors[0]!, widthDeg: 40 } as Detector],
			completeness: 1
		};
		const after = notFoundUpdate(region, [sure], 0, { ...DEFAULT_FADE, m1Spread: 0 });
		expect(after.points.probability).toEqual(region.probability);
		expect(after.nothingChance).toBe(0);
	});
});
