import { geoContains } from 'd3-geo';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { SKY_DEG2, type Equatorial } from '../angle';
import { cornerKey, cornerPoint } from '../healpix/cellCorner';
import { cellPoint } from '../healpix/healpix';
import { interleave } from '../healpix/deepCell';
import { jointRegion } from '../regions/jointRegion';
import { arbitraryPosition, seededDraws } from '../testing/arbitraryPosition';
import { angleBetweenDeg, offset, toEquatorial } from '../vector';
import { coneMoc } from './coneMoc';
import {
	complement,
	difference,
	mocAreaDeg2,
	mocContains,
	mocFromCells,
	union,
	wholeSky,
	type MocRanges
} from './moc';
import { mocOutline } from './mocOutline';

/** Outside authority: d3-geo, whose rings have their inside on the left as seen on the sky. */
function drawnInside(rings: Equatorial[][], { raDeg, decDeg }: Equatorial): boolean {
	const coordinates = rings.map((ring) =>
		ring.map((at): [number, number] => [at.raDeg, at.decDeg])
	);
	return geoContains({ type: 'Polygon', coordinates }, [raDeg, decDeg]);
}

function edgesOf(rings: Equatorial[][]): number {
	return rings.reduce((sum, ring) => sum + ring.length - 1, 0);
}

/** Centres of all cells at `order` (and so of the whole sky) that the rings put on the wrong side. */
function misplaced(moc: MocRanges, rings: Equatorial[][], order: number): number {
	let wrong = 0;
	for (let pixel = 0; pixel < 12 * 4 ** order; pixel++) {
		const at = toEquatorial(cellPoint(order, pixel, 0.5, 0.5));
		if (drawnInside(rings, at) !== mocContains(moc, at)) wrong++;
	}
	return wrong;
}

/** 90 % of a ring of 1°, by the mesh. */
function thinRing(): MocRanges {
	const centre = { raDeg: 350, decDeg: 60 };
	const ring = {
		kind: 'annulus',
		centre,
		radiusDeg: 50,
		halfWidthDeg: 0.5,
		containment: 0.9
	} as const;
	return jointRegion([ring]).moc90;
}

describe('corners of cells', () => {
	it('are the places that the cells themselves have, whichever base pixel they are reached from', () => {
		const draw = seededDraws(3);
		for (let i = 0; i < 4000; i++) {
			const order = Math.floor(draw() * 25);
			const nside = 2 ** order;
			const face = Math.floor(draw() * 12);
			// Half of them on the borders of base pixels.
			const x = draw() < 0.3 ? (draw() < 0.5 ? 0 : nside) : Math.floor(draw() * (nside + 1));
			const y = draw() < 0.3 ? (draw() < 0.5 ? 0 : nside) : Math.floor(draw() * (nside + 1));
			const cell = { x: Math.min(x, nside - 1), y: Math.min(y, nside - 1) };
			const pixel = face * nside * nside + interleave(cell.x, cell.y);
			const expected = cellPoint(order, pixel, x - cell.x, y - cell.y);
			const key = cornerKey(nside, face, x, y);
			expect(angleBetweenDeg(cornerPoint(nside, key), expected)).toBeLessThan(1e-13);
		}
	});

	it('are 12 · 4^order + 2 in all (Euler’s formula)', () => {
		for (const nside of [1, 2, 4, 16]) {
			const keys = new Set<number>();
			for (let face = 0; face < 12; face++) {
				for (let x = 0; x <= nside; x++) {
					for (let y = 0; y <= nside; y++) keys.add(cornerKey(nside, face, x, y));
				}
			}
			expect(keys.size).toBe(12 * nside * nside + 2);
		}
	});
});

describe('the outline of a coverage map', () => {
	it('has every cell’s centre on its side, for cells anywhere on the sky', () => {
		const order = 3;
		const scattered = fc.uniqueArray(fc.integer({ min: 0, max: 12 * 4 ** order - 1 }), {
			minLength: 1,
			maxLength: 300
		});
		fc.assert(
			fc.property(scattered, (pixels) => {
				const moc = mocFromCells(pixels.map((pixel) => ({ order, pixel })));
				expect(misplaced(moc, mocOutline(moc, 1e5), order)).toBe(0);
			}),
			{ numRuns: 12 }
		);
	});

	it('holds for caps of every size about every place, poles and RA 0 included, and for the rest of the sky', () => {
		fc.assert(
			fc.property(
				arbitraryPosition,
				fc.double({ min: -2, max: Math.log10(170), noNaN: true }),
				fc.integer({ min: 1, max: 1e6 }),
				(centre, logRadius, seed) => {
					const radiusDeg = 10 ** logRadius;
					const cap = coneMoc(centre, radiusDeg);
					const inside = mocOutline(cap);
					const outside = mocOutline(complement(cap));
					const draw = seededDraws(seed);
					for (let i = 0; i < 60; i++) {
						const distanceDeg = draw() * Math.min(180, 1.5 * radiusDeg);
						// Cells reach over the cap's edge by a sixteenth of its radius.
						if (Math.abs(distanceDeg - radiusDeg) < 0.1 * Math.min(radiusDeg, 90)) continue;
						const at = offset(centre, distanceDeg, draw() * 360);
						expect(drawnInside(inside, at)).toBe(distanceDeg < radiusDeg);
						// A small hole in a whole sky is too fine for the edges allowed.
						if (radiusDeg > 5) expect(drawnInside(outside, at)).toBe(distanceDeg > radiusDeg);
					}
				}
			),
			{ numRuns: 60 }
		);
	});

	it('gives holes and separate pieces rings of their own', () => {
		const ring = difference(
			coneMoc({ raDeg: 0, decDeg: 88 }, 10),
			coneMoc({ raDeg: 20, decDeg: 88 }, 4)
		);
		const far = coneMoc({ raDeg: 359.99, decDeg: -40 }, 0.01);
		const outline = mocOutline(union(ring, far), 4000);
		expect(outline).toHaveLength(3);
		for (const piece of outline) expect(piece.at(-1)).toEqual(piece[0]);
		expect(drawnInside(outline, { raDeg: 20, decDeg: 88 })).toBe(false);
		expect(drawnInside(outline, { raDeg: 200, decDeg: 85 })).toBe(true);
		expect(drawnInside(outline, { raDeg: 359.99, decDeg: -40 })).toBe(true);
		expect(drawnInside(outline, { raDeg: 359.99, decDeg: -39.9 })).toBe(false);
	});

	it('has none for nothing and for the whole sky', () => {
		expect(mocOutline([])).toEqual([]);
		expect(mocOutline(wholeSky)).toEqual([]);
	});

	it('follows a large cell’s own sides, not great circles between its corners', () => {
		const moc = mocFromCells([{ order: 0, pixel: 4 }]);
		const rings = mocOutline(moc);
		const draw = seededDraws(9);
		for (let i = 0; i < 300; i++) {
			// A degree and more away from the border, on both sides of it.
			const u = 0.02 + 0.96 * draw();
			const v = 0.02 + 0.96 * draw();
			expect(drawnInside(rings, toEquatorial(cellPoint(0, 4, u, v)))).toBe(true);
			expect(drawnInside(rings, toEquatorial(cellPoint(0, 0, u, v)))).toBe(false);
		}
	});

	it('grows to coarser cells until it is short enough, losing nothing', () => {
		const moc90 = thinRing();
		for (const maxEdges of [4000, 1000, 200]) {
			const rings = mocOutline(moc90, maxEdges);
			expect(edgesOf(rings)).toBeLessThanOrEqual(maxEdges);
			expect(rings.length).toBeGreaterThan(0);
			const middle = Array.from({ length: 90 }, (_, i) =>
				offset({ raDeg: 350, decDeg: 60 }, 50, 4 * i)
			).filter((at) => mocContains(moc90, at));
			expect(middle.length).toBeGreaterThan(70);
			const held = middle.filter((at) => drawnInside(rings, at));
			expect(held.length).toBeGreaterThan(0.95 * middle.length);
			expect(drawnInside(rings, { raDeg: 350, decDeg: 60 })).toBe(false);
		}
		expect(mocAreaDeg2(moc90)).toBeLessThan(0.03 * SKY_DEG2);
	});

	it('takes milliseconds', () => {
		const moc90 = thinRing();
		// The quickest of ten, so that a busy machine does not count.
		let quickestMs = Infinity;
		for (let i = 0; i < 10; i++) {
			const start = performance.now();
			mocOutline(moc90);
			quickestMs = Math.min(quickestMs, performance.now() - start);
		}
		expect(quickestMs).toBeLessThan(100);
	});
});
