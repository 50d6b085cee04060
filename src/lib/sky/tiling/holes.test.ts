import { describe, expect, it } from 'vitest';
import type { Equatorial } from '../angle';
import { kappaFromRadius, radiusFromKappa } from '../regions/containment';
import { fisherPoints } from '../regions/regionPoints';
import { offset, separationDeg, toVector } from '../vector';
import type { Detector } from '../visibility/telescope';
import { fieldCell } from './cell';
import { fieldAreaDeg2, preparedField, tileAxes, tileContains, type Tile } from './field';
import { latticeTile, northTile } from './placement';
import { regionSample } from './regionSample';
import { tilesFor } from './tilesFor';

const rectangle = (
	widthDeg: number,
	heightDeg: number,
	rotationDeg = 0,
	offsetXDeg = 0,
	offsetYDeg = 0
): Detector => ({ shape: 'rectangle', widthDeg, heightDeg, rotationDeg, offsetXDeg, offsetYDeg });
const circle = (radiusDeg: number, offsetXDeg = 0, offsetYDeg = 0): Detector => ({
	shape: 'circle',
	radiusDeg,
	offsetXDeg,
	offsetYDeg
});

/** Fields with the most tiles that they may take, as multiples of region / field area, from 10 fields across. */
const fields: [string, Detector[], number][] = [
	['a rectangle', [rectangle(1.5, 1)], 2],
	['a rectangle turned by 20 degrees', [rectangle(1.5, 1, 20)], 2.8],
	['a rectangle turned by 45 degrees', [rectangle(1.5, 1, 45)], 2.8],
	['a rectangle on its side', [rectangle(1.5, 1, 90)], 2],
	['a circle', [circle(0.7)], 2],
	['a rectangle off axis', [rectangle(1.2, 1.2, 20, 0.9, -0.4)], 2.4],
	[
		'four detectors with gaps',
		[-1, 1].flatMap((x) => [-1, 1].map((y) => rectangle(1, 1, 0, x * 0.55, y * 0.55))),
		6.5
	],
	[
		'a ring of six detectors',
		[0, 1, 2, 3, 4, 5].map((k) =>
			circle(0.45, 1.1 * Math.cos((k * Math.PI) / 3), 1.1 * Math.sin((k * Math.PI) / 3))
		),
		7.5
	],
	['an L of two detectors', [rectangle(2, 0.8), rectangle(0.8, 1.2, 0, -0.6, 1)], 4.2]
];
const DECS_DEG = [0, 45, -45, 80, -80, 89, -89, 90, -90];
const SAMPLES = 2000;

/** Numbers in [0, 1) from a fixed start (Numerical Recipes' linear congruence, from memory). */
function sequence(seed: number): () => number {
	let state = seed;
	return () => {
		state = (state * 1664525 + 1013904223) >>> 0;
		return state / 2 ** 32;
	};
}

/** How many of the samples inside the 90 % region no tile holds. */
function holes(tiles: Tile[], detectors: Detector[], centre: Equatorial, kappa: number): number {
	const field = preparedField(detectors);
	const axes = tiles.map(tileAxes);
	const next = sequence(20261201);
	let open = 0;
	for (let i = 0; i < SAMPLES; i += 1) {
		const held = 0.9 * next();
		const { x, y, z } = toVector(offset(centre, radiusFromKappa(kappa, held), 360 * next()));
		if (axes.some((tile) => tileContains(field, tile, x, y, z))) continue;
		open += 1;
	}
	return open;
}

describe.each(fields)('%s', (_, detectors, most) => {
	const areaDeg2 = fieldAreaDeg2(detectors);
	it.each(DECS_DEG)('leaves no hole in a region at declination %d', (decDeg) => {
		const centre = { raDeg: 0, decDeg };
		for (const fieldsAcross of [0.3, 1, 3, 10, 20]) {
			const radiusDeg = (fieldsAcross * Math.sqrt(areaDeg2)) / 2;
			const kappa = kappaFromRadius(radiusDeg, 0.9);
			const region = regionSample(fisherPoints(centre, kappa));
			const tiles = tilesFor(region, detectors, 100_000);
			const open = holes(tiles, detectors, centre, kappa);
			expect(open, `${fieldsAcross} fields across`).toBe(0);
			if (fieldsAcross < 0.5) expect(tiles).toHaveLength(1);
			if (fieldsAcross >= 10) {
				expect((tiles.length * areaDeg2) / (Math.PI * radiusDeg ** 2)).toBeLessThan(most);
			}
			// Away from the poles a field keeps its direction to north.
			if (Math.abs(decDeg) + 2 * radiusDeg < 70) {
				expect(tiles.every(({ rotationDeg }) => rotationDeg === 0)).toBe(true);
			}
		}
	});
});

describe('where a detector lands', () => {
	const detectors = [rectangle(0.2, 0.3, 20, 1.4, -0.7)];
	const cell = fieldCell(detectors);
	/** The middle of the detector on the sky, from the field's own axes. */
	const middleOf = (tile: Tile) => {
		const { along, east, north } = tileAxes(tile);
		const [c, s] = [Math.cos(Math.PI / 9), Math.sin(Math.PI / 9)];
		const e = ((1.4 * c - 0.7 * s) * Math.PI) / 180;
		const n = ((-0.7 * c - 1.4 * s) * Math.PI) / 180;
		const [x = 0, y = 0, z = 0] = along.map((value, i) => value + e * east[i]! + n * north[i]!);
		return {
			raDeg: (Math.atan2(y, x) * 180) / Math.PI,
			decDeg: (Math.atan2(z, Math.hypot(x, y)) * 180) / Math.PI
		};
	};
	const next = sequence(7);
	const places = Array.from({ length: 300 }, (_, i) => ({
		raDeg: 360 * next(),
		decDeg: (i % 2 === 0 ? 1 : -1) * (i < 100 ? 90 * next() : 90 - 3 * next())
	}));

	it('is on the position asked for, at rotation 0 wherever that can be', () => {
		let unreached = 0;
		for (const place of places) {
			const tile = northTile(place, cell);
			if (tile) {
				expect(tile.rotationDeg).toBe(0);
				expect(separationDeg(middleOf(tile), place)).toBeLessThan(1e-5);
			} else {
				unreached += 1;
				// No farther from the pole than the detector is from the axis.
				expect(90 - Math.abs(place.decDeg)).toBeLessThan(Math.hypot(1.4, 0.7));
			}
		}
		expect(unreached).toBeGreaterThan(20);
	});

	it('is on the position asked for when the tile is turned, the poles included', () => {
		const poles = [90, -90].flatMap((decDeg) => [0, 77].map((raDeg) => ({ raDeg, decDeg })));
		for (const place of [...places, ...poles]) {
			const tile = latticeTile(place, cell, { raDeg: 12, decDeg: 88 });
			expect(separationDeg(middleOf(tile), place)).toBeLessThan(1e-9);
		}
	});

	it('takes the pointing on the position’s own side of the pole', () => {
		// Two degrees north of the axis: a pointing at 87° does it, and one at 89° on the other side of the pole.
		const detector = rectangle(0.2, 0.2, 0, 0, 2);
		const position = { raDeg: 40, decDeg: 89 };
		const tile = northTile(position, fieldCell([detector]))!;
		expect(tile.centre.raDeg).toBeCloseTo(40, 6);
		expect(tile.centre.decDeg).toBeCloseTo(87, 2);
		const { x, y, z } = toVector(position);
		const across = { centre: { raDeg: 220, decDeg: 89 }, rotationDeg: 0 };
		for (const one of [tile, across]) {
			expect(tileContains(preparedField([detector]), tileAxes(one), x, y, z)).toBe(true);
		}
	});

	it('is never reached at rotation 0 beyond the pole, where north is turned round', () => {
		const cell = fieldCell([rectangle(0.2, 0.2, 0, 0, -2)]);
		expect(northTile({ raDeg: 40, decDeg: 89 }, cell)).toBeNull();
		expect(northTile({ raDeg: 40, decDeg: 87.9 }, cell)?.centre.decDeg).toBeCloseTo(89.9, 2);
	});
});
