import { describe, expect, it } from 'vitest';
import { normaliseDeg, type Equatorial } from '../angle';
import type { RegionPoints } from '../regions/jointRegion';
import { offset, separationDeg, toVector } from '../vector';
import type { Detector } from '../visibility/telescope';
import { preparedField, tileAxes, tileContains, tileOutlines } from './field';
import { regionSample } from './regionSample';
import { tilesFor, type RegionTile } from './tilesFor';

const GOLDEN_ANGLE_DEG = 137.50776405003785;

/** Equal-weight points spread evenly over a disc. */
function disc(centre: Equatorial, radiusDeg: number, count: number): RegionPoints {
	const points: RegionPoints = { raDeg: [], decDeg: [], probability: [] };
	for (let i = 0; i < count; i += 1) {
		const place = offset(
			centre,
			radiusDeg * Math.sqrt((i + 0.5) / count),
			normaliseDeg(i * GOLDEN_ANGLE_DEG)
		);
		points.raDeg.push(place.raDeg);
		points.decDeg.push(place.decDeg);
		points.probability.push(1 / count);
	}
	return points;
}

const rectangle = (widthDeg: number, heightDeg: number, rotationDeg = 0): Detector => ({
	shape: 'rectangle',
	widthDeg,
	heightDeg,
	rotationDeg,
	offsetXDeg: 0,
	offsetYDeg: 0
});

const mosaic: Detector[] = [-1, 1].flatMap((x) =>
	[-1, 1].map((y) => ({
		...rectangle(1, 1),
		offsetXDeg: x * 0.55,
		offsetYDeg: y * 0.55
	}))
);

const fields: [string, Detector[]][] = [
	['a square', [rectangle(1.3, 1.3)]],
	['a wide rectangle', [rectangle(2.4, 0.9)]],
	['a rectangle on its side', [rectangle(2.4, 0.9, 90)]],
	['a turned rectangle', [rectangle(1.5, 1.1, 33)]],
	['a circle', [{ shape: 'circle', radiusDeg: 0.8, offsetXDeg: 0, offsetYDeg: 0 }]],
	['four detectors with gaps', mosaic],
	['a detector off axis', [{ ...rectangle(1.2, 1.2, 20), offsetXDeg: 0.9, offsetYDeg: -0.4 }]]
];

const centres: [string, Equatorial][] = [
	['on the equator at right ascension 0', { raDeg: 0, decDeg: 0 }],
	['at 45 degrees north', { raDeg: 130, decDeg: 45 }],
	['at 78 degrees south', { raDeg: 359.5, decDeg: -78 }],
	['on the north pole', { raDeg: 0, decDeg: 90 }],
	['beside the south pole', { raDeg: 200, decDeg: -88.5 }]
];

/** Share of positions, spread over a disc, that no tile holds. */
function uncovered(tiles: RegionTile[], detectors: Detector[], positions: RegionPoints): number {
	const field = preparedField(detectors);
	const axes = tiles.map(tileAxes);
	const missing = positions.raDeg.filter((raDeg, i) => {
		const { x, y, z } = toVector({ raDeg, decDeg: positions.decDeg[i]! });
		return !axes.some((tile) => tileContains(field, tile, x, y, z));
	});
	return missing.length / positions.raDeg.length;
}

describe.each(fields)('a tiling of %s', (_, detectors) => {
	it.each(centres)('leaves no hole in the 90 percent region: %s', (where, centre) => {
		// A field that keeps its direction to north and has nothing on its axis can't point at the pole.
		const onAxis = detectors.length === 1 && detectors[0]?.offsetXDeg === 0;
		if (!onAxis && where.includes('pole')) {
			expect(Math.abs(centre.decDeg)).toBeGreaterThan(85);
			return;
		}
		const region = regionSample(disc(centre, 5, 1500));
		const tiles = tilesFor(region, detectors, 10_000);
		// The densest 90 % of an even disc reach to √0.9 of its radius; the rim is left to the estimate of density.
		const positions = disc(centre, 5 * Math.sqrt(0.9) * 0.93, 20_011);
		expect(uncovered(tiles, detectors, positions)).toBeLessThan(0.0005);
		const held = tiles.reduce((sum, tile) => sum + tile.probability, 0);
		expect(held).toBeGreaterThan(0.9 - 1e-9);
		expect(held).toBeLessThan(1 + 1e-9);
	});
});

describe('tiles', () => {
	it('is one field at the middle when that holds the region', () => {
		const centre = { raDeg: 83.4, decDeg: -8.2 };
		const region = regionSample(disc(centre, 0.3, 200));
		const tiles = tilesFor(region, [rectangle(1, 1)], 20);
		expect(tiles).toHaveLength(1);
		expect(separationDeg(tiles[0]!.centre, centre)).toBeLessThan(0.01);
		expect(tiles[0]!.probability).toBeCloseTo(1, 9);
	});

	it('puts a region onto a detector, not into the gap between detectors', () => {
		const centre = { raDeg: 83.4, decDeg: -8.2 };
		const region = regionSample(disc(centre, 0.03, 50));
		const tiles = tilesFor(region, mosaic, 20);
		expect(tiles).toHaveLength(1);
		expect(tiles[0]!.probability).toBeCloseTo(1, 9);
	});

	it('keeps the most probable fields when there are too many', () => {
		const region = regionSample(disc({ raDeg: 10, decDeg: 20 }, 5, 1500));
		const all = tilesFor(region, [rectangle(1, 1)], 10_000);
		const few = tilesFor(region, [rectangle(1, 1)], 12);
		expect(few).toHaveLength(12);
		const best = all.slice(0, 12).reduce((sum, tile) => sum + tile.probability, 0);
		expect(few.reduce((sum, tile) => sum + tile.probability, 0)).toBeGreaterThan(0.9 * best);
	});

	it('does not claim more than its share of a point that stands for more sky than the field', () => {
		// 1500 points on 78.5 square degrees: one stands for 0.052, the field is 0.01.
		const region = regionSample(disc({ raDeg: 10, decDeg: 20 }, 5, 1500));
		const tiles = tilesFor(region, [rectangle(0.1, 0.1)], 30);
		const expected = 0.01 / (Math.PI * 25);
		for (const tile of tiles) expect(tile.probability).toBeLessThan(2.5 * expected);
		const mean = tiles.reduce((sum, tile) => sum + tile.probability, 0) / tiles.length;
		expect(mean).toBeGreaterThan(0.8 * expected);
	});

	it('needs few more fields than the area asks for', () => {
		const region = regionSample(disc({ raDeg: 100, decDeg: 60 }, 5, 1500));
		const tiles = tilesFor(region, [rectangle(1, 1)], 10_000);
		expect(tiles.length).toBeLessThan(1.6 * Math.PI * 25 * 0.9);
	});

	it('draws outlines whose corners lie on the rim of the field', () => {
		const tile = { centre: { raDeg: 0, decDeg: 60 }, rotationDeg: 25 };
		const field = preparedField([rectangle(1, 0.5, 10)]);
		const [corners = []] = tileOutlines(tile, [rectangle(1, 0.5, 10)]);
		expect(corners).toHaveLength(4);
		for (const corner of corners) {
			const angleDeg = separationDeg(tile.centre, corner);
			expect(angleDeg).toBeCloseTo(Math.hypot(0.5, 0.25), 3);
			const half = offset(tile.centre, angleDeg * 0.999, bearing(tile.centre, corner));
			const { x, y, z } = toVector(half);
			expect(tileContains(field, tileAxes(tile), x, y, z)).toBe(true);
			const past = toVector(offset(tile.centre, angleDeg * 1.001, bearing(tile.centre, corner)));
			expect(tileContains(field, tileAxes(tile), past.x, past.y, past.z)).toBe(false);
		}
	});

	it('refuses an empty field and an empty region', () => {
		expect(() => preparedField([])).toThrow(RangeError);
		expect(() => regionSample({ raDeg: [], decDeg: [], probability: [] })).toThrow(RangeError);
		expect(() => regionSample({ raDeg: [1], decDeg: [1], probability: [Number.NaN] })).toThrow(
			/probability NaN/
		);
	});
});

function bearing(from: Equatorial, to: Equatorial): number {
	const a = toVector(from);
	const b = toVector(to);
	const { east, north } = tileAxes({ centre: from, rotationDeg: 0 });
	const along = (axis: number[]) => axis[0]! * b.x + axis[1]! * b.y + axis[2]! * b.z;
	expect(Math.abs(along([a.x, a.y, a.z]))).toBeGreaterThan(0);
	return (Math.atan2(along(east), along(north)) * 180) / Math.PI;
}
