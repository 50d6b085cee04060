import { describe, expect, it } from 'vitest';
import healpix from '../../../../fixtures/sky/healpix.json';
import { fromGalactic } from '../galactic';
import { cellAreaSr, cellVector, fromUniq, pixelAt } from '../healpix/healpix';
import { seededDraws } from '../testing/arbitraryPosition';
import { dot, separationDeg, toEquatorial, toVector } from '../vector';
import { areaFromKappa, kappaFromSigma } from './containment';
import { sortedMap } from './density/sortedMap';
import { jointRegion } from './jointRegion';
import { leanMap } from './leanMap';
import { MapFault } from './mapFault';
import { mapShapeFrom, type MapSource } from './mapShapeFrom';
import type { MapShape } from './shape';
import { turnedMap } from './turnedMap';

const CENTRE = { raDeg: 123.4, decDeg: -23.4 };
const KAPPA = kappaFromSigma(3);

/** A Fisher density of σ 3° at the centres of the cells of one order, NESTED. */
function fisherPixels(order: number): Float64Array {
	const axis = toVector(CENTRE);
	return Float64Array.from({ length: 12 * 4 ** order }, (_, pixel) =>
		Math.exp(KAPPA * (dot(cellVector(order, pixel), axis) - 1))
	);
}

const held = ({ uniq, density }: MapShape) =>
	uniq.reduce((sum, one, i) => sum + (density[i] ?? 0) * cellAreaSr(fromUniq(one).order), 0);

describe('a flat map', { timeout: 60_000 }, () => {
	it('in RING order has each pixel where healpy has it in NESTED order', () => {
		for (const [column, nside] of healpix.nsides.entries()) {
			if (nside > 64) continue;
			const probability = new Float64Array(12 * nside * nside);
			const expected = new Map<number, number>();
			healpix.directions.forEach((row, i) => {
				probability[row.ring[column] ?? 0] = i + 1;
				expected.set(4 * nside * nside + (row.nest[column] ?? 0), i + 1);
			});
			const map = mapShapeFrom({ nside, ordering: 'ring', frame: 'icrs', probability });
			expect(map.uniq).toEqual([...expected.keys()].sort((a, b) => a - b));
			map.uniq.forEach((uniq, i) => {
				const ratio = (map.density[i] ?? 0) / (map.density[0] ?? 1);
				const asked = (expected.get(uniq) ?? 0) / (expected.get(map.uniq[0] ?? 0) ?? 1);
				expect(Math.abs(ratio / asked - 1)).toBeLessThan(1e-6);
			});
		}
	});

	it('merges equal pixels without loss and leaves empty ones out', () => {
		const density = new Float64Array(12 * 4 ** 5);
		density.fill(3, 0, 1024);
		density.fill(1, 1024, 1024 + 64);
		density[4000] = 7;
		const map = mapShapeFrom({ order: 5, ordering: 'nested', frame: 'icrs', density });
		expect(map.uniq).toEqual([4, 64 + 16, 4 * 4 ** 5 + 4000]);
		expect((map.density[0] ?? 0) / (map.density[1] ?? 1)).toBeCloseTo(3, 6);
		expect((map.density[2] ?? 0) / (map.density[1] ?? 1)).toBeCloseTo(7, 6);
		expect(held(map)).toBeCloseTo(1, 6);
	});

	it('is made to fit by merging what differs least: at nside 512 a thousandth of the area is not touched', () => {
		const density = fisherPixels(9);
		const map = mapShapeFrom({ order: 9, ordering: 'nested', frame: 'icrs', density }, 20_000);
		expect(map.uniq.length).toBeLessThanOrEqual(20_000);
		const region = jointRegion([map]);
		expect(Math.abs(region.area90Deg2 / areaFromKappa(KAPPA, 0.9) - 1)).toBeLessThan(0.001);
		expect(Math.abs(region.area50Deg2 / areaFromKappa(KAPPA, 0.5) - 1)).toBeLessThan(0.001);
	});
});

describe('a galactic map', { timeout: 60_000 }, () => {
	it('has the same areas in ICRS, and its centre where the rotation puts it', () => {
		const density = fisherPixels(7);
		const region = jointRegion([
			mapShapeFrom({ order: 7, ordering: 'nested', frame: 'galactic', density })
		]);
		expect(Math.abs(region.area90Deg2 / areaFromKappa(KAPPA, 0.9) - 1)).toBeLessThan(0.003);
		expect(Math.abs(region.area50Deg2 / areaFromKappa(KAPPA, 0.5) - 1)).toBeLessThan(0.004);
		const expected = toEquatorial(fromGalactic(toVector(CENTRE)));
		expect(separationDeg(region.centre, expected)).toBeLessThan(0.001);
	});

	it('keeps its probability to 2e-4 even before it is normalised', () => {
		const uniq = Array.from({ length: 12 * 4 ** 6 }, (_, pixel) => 4 * 4 ** 6 + pixel);
		const lean = leanMap(1, 1e6);
		let sum = 0;
		turnedMap(sortedMap({ uniq, density: fisherPixels(6) }), {
			...lean,
			add: (order, _, density) => (sum += density * cellAreaSr(order))
		});
		expect(Math.abs(sum - 1)).toBeLessThan(2e-4);
	});

	it('keeps the share of a single pixel to 5 %', () => {
		const draw = seededDraws(11);
		const uniq = Array.from(
			{ length: 8 },
			(_, i) => 4 * 4 ** 6 + 6000 * i + Math.floor(draw() * 999)
		);
		const map = mapShapeFrom({ uniq, density: uniq.map(() => 1), frame: 'galactic' });
		const places = uniq.map((one) => fromGalactic(cellVector(6, fromUniq(one).pixel)));
		const shares = places.map((place) =>
			map.uniq.reduce((sum, one, i) => {
				const { order, pixel } = fromUniq(one);
				const near = dot(cellVector(order, pixel), place) > Math.cos(0.04);
				return sum + (near ? (map.density[i] ?? 0) * cellAreaSr(order) : 0);
			}, 0)
		);
		for (const share of shares) expect(Math.abs(share * uniq.length - 1)).toBeLessThan(0.05);
		expect(held(map)).toBeCloseTo(1, 6);
	});

	it('of one density everywhere is the whole sky', () => {
		const density = new Float64Array(12).fill(2);
		const map = mapShapeFrom({ order: 0, ordering: 'ring', frame: 'galactic', density });
		expect(map.uniq).toEqual([4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15]);
	});
});

describe('a multi-order map', { timeout: 60_000 }, () => {
	it('is sorted, merged and normalised', () => {
		const map = mapShapeFrom({ uniq: [19, 18, 17, 16, 15], density: [2, 2, 2, 2, 6] });
		expect(map.uniq).toEqual([4, 15]);
		expect((map.density[1] ?? 0) / (map.density[0] ?? 1)).toBeCloseTo(3, 6);
		expect(held(map)).toBeCloseTo(1, 6);
	});

	it('of isolated cells of the finest order can be made to fit', () => {
		const uniq = Array.from({ length: 300 }, (_, i) =>
			Number(4n * 4n ** 24n + BigInt(pixelAt(24, { raDeg: i, decDeg: i / 4 })))
		);
		const map = mapShapeFrom({ uniq, density: uniq.map((_, i) => i + 1) }, 100);
		expect(map.uniq.length).toBeLessThanOrEqual(100);
		expect(held(map)).toBeCloseTo(1, 6);
	});
});

describe('a bad map', () => {
	const flat = { order: 0, ordering: 'nested', frame: 'icrs' } as const;
	const twelve = (value: number) => [1, 1, 1, value, 1, 1, 1, 1, 1, 1, 1, 1];
	it.each<[string, MapSource, string, number | null]>([
		['a negative pixel', { ...flat, density: twelve(-1) }, 'density', 3],
		['a pixel that is no number', { ...flat, probability: twelve(NaN) }, 'probability', 3],
		['an infinite pixel', { ...flat, density: twelve(Infinity) }, 'density', 3],
		['too few pixels', { ...flat, density: [1, 2] }, 'density', null],
		['nothing in it', { ...flat, density: new Float64Array(12) }, 'density', null],
		['a sum that overflows', { ...flat, density: twelve(1.7e308).fill(1.7e308) }, 'density', null],
		['an order past 11', { ...flat, order: 12, density: [] }, 'order', null],
		['an nside of 3', { nside: 3, ordering: 'ring', frame: 'icrs', density: [] }, 'nside', null],
		['a cell twice', { uniq: [4, 5, 4], density: [1, 1, 1] }, 'uniq', 2],
		['a cell in another', { uniq: [4, 17], density: [1, 1] }, 'uniq', 1],
		['no such cell', { uniq: [4, 3], density: [1, 1] }, 'uniq', 1]
	])('with %s is refused by field and entry', (_, source, field, entry) => {
		expect(() => mapShapeFrom(source)).toThrow(MapFault);
		try {
			mapShapeFrom(source);
		} catch (error) {
			expect(error).toMatchObject({ field, entry });
		}
	});
});
