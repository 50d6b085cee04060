import { describe, expect, it } from 'vitest';
import { DEG_PER_RAD } from '../../angle';
import { cellAreaSr, cellRadiusRad, cellVector } from '../../healpix/healpix';
import { seededDraws } from '../../testing/arbitraryPosition';
import { toEquatorial } from '../../vector';
import type { Shape } from '../shape';
import { densityOf } from './densityOf';

const at = (raDeg: number, decDeg: number) => ({ raDeg, decDeg });
const oneSixthMap: Shape = {
	kind: 'map',
	uniq: [4, 4 * 4 + 9, 4 * 16 + 180],
	density: [2, 5, 1]
};

const shapes: [name: string, shape: Shape][] = [
	['circle', { kind: 'circle', centre: at(83, -8), radiusDeg: 12, containment: 0.9 }],
	['wide circle', { kind: 'circle', centre: at(0, 90), radiusDeg: 80, containment: 0.6827 }],
	['hard circle', { kind: 'hardCircle', centre: at(359, 41.8), radiusDeg: 25 }],
	['hard circle past 90°', { kind: 'hardCircle', centre: at(10, -60), radiusDeg: 130 }],
	[
		'ellipse',
		{
			kind: 'ellipse',
			centre: at(200, 75),
			semiMajorDeg: 30,
			semiMinorDeg: 12,
			positionAngleDeg: 40,
			containment: 0.9
		}
	],
	[
		'very wide ellipse',
		{
			kind: 'ellipse',
			centre: at(20, 0),
			semiMajorDeg: 85,
			semiMinorDeg: 30,
			positionAngleDeg: 100,
			containment: 0.9
		}
	],
	[
		'annulus',
		{ kind: 'annulus', centre: at(300, -45), radiusDeg: 50, halfWidthDeg: 8, containment: 0.9 }
	],
	[
		'annulus about a point',
		{ kind: 'annulus', centre: at(300, -45), radiusDeg: 0, halfWidthDeg: 20, containment: 0.9 }
	],
	[
		'polygon',
		{ kind: 'polygon', vertices: [at(350, -10), at(20, -15), at(30, 30), at(5, 5), at(340, 25)] }
	],
	[
		'clockwise polygon over the pole',
		{ kind: 'polygon', vertices: [at(270, 60), at(180, 65), at(90, 70), at(0, 60)] }
	],
	['map', oneSixthMap]
];

describe.each(shapes)('density of a %s', (_, shape) => {
	const density = densityOf(shape);

	it('integrates to 1 over the sky', () => {
		const order = 7;
		let sum = 0;
		for (let pixel = 0; pixel < 12 * 4 ** order; pixel++) {
			sum += Math.exp(density.logAt(cellVector(order, pixel))) * cellAreaSr(order);
		}
		expect(Math.abs(sum - 1)).toBeLessThan(0.003);
	});

	it('stays below its bound in every cell, and below its peak', () => {
		const draw = seededDraws(3);
		for (let i = 0; i < 400; i++) {
			const order = Math.floor(draw() * 6);
			const pixel = Math.floor(draw() * 12 * 4 ** order);
			const place = { order, pixel, at: cellVector(order, pixel), reachRad: cellRadiusRad(order) };
			const bound = density.logBound(place);
			expect(bound).toBeLessThanOrEqual(density.logPeak + 1e-9);
			for (let inner = 0; inner < 16; inner++) {
				expect(density.logAt(cellVector(order + 2, 16 * pixel + inner))).toBeLessThanOrEqual(
					bound + 1e-9
				);
			}
		}
	});
});

describe('maps', () => {
	it('give the density of the cell that holds a position, and none where no cell does', () => {
		const density = densityOf(oneSixthMap);
		const unit = 2 * cellAreaSr(0) + 5 * cellAreaSr(1) + cellAreaSr(2);
		expect(Math.exp(density.logAt(cellVector(5, 17)))).toBeCloseTo(2 / unit, 9);
		expect(Math.exp(density.logAt(cellVector(2, 180)))).toBeCloseTo(1 / unit, 9);
		expect(density.logAt(cellVector(2, 181))).toBe(-Infinity);
	});

	it('give a coarse cell the mean of what lies in it', () => {
		const density = densityOf(oneSixthMap);
		const cell = { order: 0, pixel: 11, at: cellVector(0, 11), reachRad: cellRadiusRad(0) };
		const unit = 2 * cellAreaSr(0) + 5 * cellAreaSr(1) + cellAreaSr(2);
		expect(Math.exp(density.logIn(cell))).toBeCloseTo(1 / 16 / unit, 9);
	});

	it('do not depend on the order of their cells', () => {
		const reversed = densityOf({
			kind: 'map',
			uniq: [...oneSixthMap.uniq].reverse(),
			density: [1, 5, 2]
		});
		for (let pixel = 0; pixel < 192; pixel++) {
			const direction = cellVector(2, pixel);
			expect(reversed.logAt(direction)).toBe(densityOf(oneSixthMap).logAt(direction));
		}
	});

	it.each([
		[{ uniq: [4], density: [-1] }, /density\[0\] is -1/],
		[{ uniq: [4], density: [NaN] }, /density\[0\] is NaN/],
		[{ uniq: [4, 5], density: [1, Infinity] }, /density\[1\] is Infinity/],
		[{ uniq: [4, 17], density: [1, 1] }, /overlaps another cell/],
		[{ uniq: [4], density: [0] }, /0 everywhere/],
		[{ uniq: [], density: [] }, /equally many/],
		[{ uniq: [4, 5], density: [1] }, /equally many/],
		[{ uniq: [3], density: [1] }, /uniq\[0\] is 3/],
		[{ uniq: [4.5], density: [1] }, /uniq\[0\] is 4.5/]
	])('refuse %o', (map, message) => {
		expect(() => densityOf({ kind: 'map', ...map })).toThrow(message);
	});
});

describe('polygons', () => {
	it('take the smaller side, whatever the sense, and refuse what encloses nothing', () => {
		const vertices = [at(10, 10), at(12, 10), at(12, 12), at(10, 12)];
		const area = (list: typeof vertices) =>
			Math.exp(-densityOf({ kind: 'polygon', vertices: list }).logPeak) * DEG_PER_RAD ** 2;
		// 2° of RA between the parallels, less the bulge of two great circles.
		expect(area(vertices)).toBeCloseTo(area([...vertices].reverse()), 12);
		expect(area(vertices)).toBeGreaterThan(3.9);
		expect(area(vertices)).toBeLessThan(3.97);
		const octant = [at(0, 0), at(90, 0), at(0, 90)];
		expect(area(octant)).toBeCloseTo(41252.96124941928 / 8, 8);
		expect(() => area([at(1, 1), at(2, 2)])).toThrow(/at least 3/);
		expect(() => area([at(1, 0), at(2, 0), at(3, 0)])).toThrow(/no area/);
	});

	it('keep their digits at arcseconds', () => {
		const side = 1 / 3600;
		const small: Shape = {
			kind: 'polygon',
			vertices: [at(0, 0), at(side, 0), at(side, side), at(0, side)]
		};
		const density = densityOf(small);
		expect(Math.exp(-density.logPeak) * (DEG_PER_RAD * 3600) ** 2).toBeCloseTo(1, 8);
		expect(density.logAt({ x: 1, y: side / 2 / DEG_PER_RAD, z: side / 2 / DEG_PER_RAD })).toBe(
			density.logPeak
		);
		expect(toEquatorial({ x: 1, y: 0, z: 0 })).toEqual(at(0, 0));
	});
});

describe('bad shapes', () => {
	it.each<[Shape, RegExp]>([
		[{ kind: 'circle', centre: at(0, 0), radiusDeg: -1, containment: 0.9 }, /radiusDeg is -1/],
		[{ kind: 'circle', centre: at(0, 0), radiusDeg: 1, containment: 90 }, /containment is 90/],
		[
			{ kind: 'circle', centre: at(0, 0), radiusDeg: 1, containment: 0.9, systematicDeg: -2 },
			/systematicDeg is -2/
		],
		[{ kind: 'hardCircle', centre: at(0, 0), radiusDeg: 0 }, /radiusDeg is 0/],
		[
			{
				kind: 'ellipse',
				centre: at(0, 0),
				semiMajorDeg: 1,
				semiMinorDeg: 0,
				positionAngleDeg: 0,
				containment: 0.9
			},
			/semiMinorDeg is 0/
		],
		[
			{ kind: 'annulus', centre: at(0, 0), radiusDeg: 200, halfWidthDeg: 1, containment: 0.9 },
			/radiusDeg is 200/
		],
		[
			{ kind: 'annulus', centre: at(0, 0), radiusDeg: 20, halfWidthDeg: NaN, containment: 0.9 },
			/halfWidthDeg is NaN/
		]
	])('are refused by name: %o', (shape, message) => {
		expect(() => densityOf(shape)).toThrow(message);
	});
});
