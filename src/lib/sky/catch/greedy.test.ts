import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { regionSample } from '../tiling/regionSample';
import { sharedSky, siteSky, skyTarget } from '../visibility/siteSky';
import { telescopeNights } from '../visibility/targetWindows';
import type { Depth } from '../visibility/telescope';
import { DEFAULT_FADE, detectChance } from './fade';
import { networkCatch } from './networkCatch';
import { limitMagAt, tilePlan, type TileOnSky } from './tilePlan';

const HOUR_MS = 3_600_000;
const START_MS = Date.UTC(2026, 11, 1, 2);
const depth: Depth = {
	filter: 'R',
	refLimitMag: 20,
	refExposureS: 60,
	floorMag: 24,
	extinctionMag: 0.1,
	darkSkyMag: 21.5
};
const shared = sharedSky(START_MS, START_MS + 12 * HOUR_MS);
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
	START_MS,
	START_MS + 12 * HOUR_MS
);

/** A tile that is visible from one minute to another; all lie close together, so that depths are alike. */
function tileOf(id: number, probability: number, fromMin: number, toMin: number): TileOnSky {
	const centre = { raDeg: 60 + id / 100, decDeg: -30 };
	return {
		tile: {
			centre,
			rotationDeg: id,
			probability,
			members: Int32Array.of(id),
			parts: Float64Array.of(probability)
		},
		target: skyTarget(centre, shared),
		windows: [
			{
				startMs: START_MS + fromMin * 60_000,
				endMs: START_MS + toMin * 60_000,
				opensBy: 'altitude',
				endsBy: 'altitude'
			}
		]
	};
}

const spec = { depth, exposureS: 300, overheadS: 60, maxTiles: 20 };
const common = { telescope, fromMs: START_MS, t0Ms: START_MS - HOUR_MS, fade: DEFAULT_FADE };
const planOf = (tiles: TileOnSky[], maxTiles = 20) =>
	tilePlan({ ...common, spec: { ...spec, maxTiles }, tiles });

/** The definition, minute by minute of the clock and tile by tile, with nothing kept between steps. */
function planByHand(tiles: TileOnSky[]): { id: number; startMs: number }[] {
	const taken: { id: number; startMs: number }[] = [];
	let clockMs = START_MS;
	while (clockMs < START_MS + 12 * HOUR_MS) {
		const middleMs = clockMs + 150_000;
		const choices = tiles
			.filter(({ tile }) => !taken.some(({ id }) => id === tile.rotationDeg))
			.filter(({ windows: [w] }) => w!.startMs <= clockMs && w!.endMs >= clockMs + 300_000)
			.map(({ tile, target, windows: [w] }) => {
				const limit = limitMagAt({ telescope, spec }, middleMs)(target);
				const chance = detectChance(DEFAULT_FADE, common.t0Ms, middleMs, limit);
				return { id: tile.rotationDeg, gain: tile.probability * chance, setsMs: w!.endMs };
			});
		const most = Math.max(0, ...choices.map(({ gain }) => gain));
		const [first] = choices
			.filter(({ gain }) => gain >= 0.99 * most)
			.sort((a, b) => a.setsMs - b.setsMs || b.gain - a.gain);
		if (first) taken.push({ id: first.id, startMs: clockMs });
		clockMs += first ? 360_000 : 60_000;
	}
	return taken;
}

describe('the order of a plan', () => {
	const tileArbitrary = fc.record({
		// Few values, so that equal and nearly equal gains are common.
		probability: fc.constantFrom(0.1, 0.2, 0.1995, 0.199, 0.1985, 0.05),
		fromMin: fc.integer({ min: 0, max: 120 }),
		lengthMin: fc.integer({ min: 1, max: 90 })
	});

	it('is what the definition says, whatever the tiles', () => {
		fc.assert(
			fc.property(fc.array(tileArbitrary, { minLength: 1, maxLength: 8 }), (rows) => {
				const tiles = rows.map(({ probability, fromMin, lengthMin }, id) =>
					tileOf(id, probability + id * 1e-9, fromMin, fromMin + lengthMin)
				);
				const plan = planOf(tiles).map(({ rotationDeg, startMs }) => ({
					id: rotationDeg,
					startMs
				}));
				expect(plan).toEqual(planByHand(tiles));
			}),
			{ seed: 20261201, numRuns: 200 }
		);
	});

	it('takes the greatest gain first, and the setting tile first when gains are equal', () => {
		const order = (tiles: TileOnSky[]) => planOf(tiles).map(({ rotationDeg }) => rotationDeg);
		expect(order([tileOf(1, 0.2, 0, 90), tileOf(2, 0.3, 0, 200)])).toEqual([2, 1]);
		expect(order([tileOf(1, 0.2, 0, 200), tileOf(2, 0.2, 0, 90)])).toEqual([2, 1]);
	});

	it('does not go down a chain of tiles that are each almost equal to the next', () => {
		const chain = [0.2, 0.1985, 0.197, 0.1955].map((p, id) => tileOf(id, p, 0, 300 - 20 * id));
		// The second is within 1 % of the first; the others are not, though each is of the one before.
		expect(planOf(chain)[0]?.rotationDeg).toBe(1);
	});

	it('leaves an overhead between exposures and stops at the most tiles allowed', () => {
		const tiles = [0, 1, 2, 3].map((id) => tileOf(id, 0.2, 0, 300));
		const starts = planOf(tiles, 3).map(({ startMs }) => startMs - START_MS);
		expect(starts).toEqual([0, 360_000, 720_000]);
	});
});

describe('the order of the network', () => {
	const POINTS = 5;
	const weights = [0.1, 0.3, 0.25, 0.15, 0.2];
	const region = regionSample({
		raDeg: weights.map((_, i) => 10 + i),
		decDeg: weights.map(() => 0),
		probability: weights
	});
	const chance = fc.constantFrom(0, 0.2, 0.5, 0.7, 0.9);
	const network = fc.array(fc.array(chance, { minLength: POINTS, maxLength: POINTS }), {
		minLength: 1,
		maxLength: 6
	});
	/** Every point once, at the best chance that any of these telescopes gives it. */
	const caughtBy = (rows: readonly number[][]) =>
		weights.reduce((sum, p, i) => sum + p * Math.max(0, ...rows.map((row) => row[i]!)), 0);
	const greedyOf = (rows: number[][]) =>
		networkCatch(
			rows.map((row, i) => ({ telescopeId: `t${i}`, chances: Float64Array.from(row) })),
			region
		);

	it('picks what adds most at every step, and catches what all of them do together', () => {
		fc.assert(
			fc.property(network, (rows) => {
				const { catch: total, order } = greedyOf(rows);
				expect(total).toBeCloseTo(caughtBy(rows), 9);
				const picked: number[][] = [];
				for (const { telescopeId, gain } of order) {
					const before = caughtBy(picked);
					const best = Math.max(...rows.map((row) => caughtBy([...picked, row]) - before));
					const own = rows[Number(telescopeId.slice(1))]!;
					expect(caughtBy([...picked, own]) - before).toBeCloseTo(gain, 9);
					expect(gain).toBeCloseTo(best, 9);
					picked.push(own);
				}
				for (const row of rows) expect(caughtBy([...picked, row])).toBeCloseTo(total, 5);
			}),
			{ seed: 20261201, numRuns: 300 }
		);
	});

	it('is within 1 − 1/e of the best choice of as many telescopes', () => {
		// Nemhauser, Wolsey & Fisher 1978, Mathematical Programming 14, 265.
		fc.assert(
			fc.property(network, (rows) => {
				const { order } = greedyOf(rows);
				let caught = 0;
				order.forEach(({ gain }, k) => {
					caught += gain;
					const best = Array.from({ length: 2 ** rows.length }, (_, mask) =>
						rows.filter((_row, i) => (mask >> i) % 2 === 1)
					)
						.filter((subset) => subset.length === k + 1)
						.reduce((most, subset) => Math.max(most, caughtBy(subset)), 0);
					expect(caught).toBeGreaterThanOrEqual((1 - 1 / Math.E) * best - 1e-9);
				});
			}),
			{ seed: 20261201, numRuns: 300 }
		);
	});
});
