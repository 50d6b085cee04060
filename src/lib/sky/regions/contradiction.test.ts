import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mocContains } from '../moc/moc';
import { expectSound } from '../testing/expectSound';
import { jointRegion } from './jointRegion';
import type { CircleShape, HardCircleShape, Shape } from './shape';

function circle(raDeg: number, decDeg: number, radiusDeg: number, containment = 0.9): CircleShape {
	return { kind: 'circle', centre: { raDeg, decDeg }, radiusDeg, containment };
}

function hardCircle(raDeg: number, decDeg: number, radiusDeg: number): HardCircleShape {
	return { kind: 'hardCircle', centre: { raDeg, decDeg }, radiusDeg };
}

describe('parts that do not overlap', { timeout: 60_000 }, () => {
	it.each<[string, Shape[]]>([
		['two circles', [circle(83, -8, 2), circle(123, -8, 2)]],
		['antipodal circles', [circle(83, -8, 3), circle(263, 8, 3)]],
		['arcsecond circles', [circle(83, -8, 2 / 3600), circle(83, -8.01, 2 / 3600)]],
		['hard circles', [hardCircle(10, 0, 5), hardCircle(30, 0, 4)]],
		['a hard circle and a far arcsecond circle', [hardCircle(10, 0, 5), circle(40, 0, 2 / 3600)]],
		[
			'a polygon and a circle',
			[
				{
					kind: 'polygon',
					vertices: [
						{ raDeg: 350, decDeg: -10 },
						{ raDeg: 10, decDeg: -10 },
						{ raDeg: 0, decDeg: 10 }
					]
				},
				circle(80, 0, 3)
			]
		],
		[
			'a map and a hard circle outside it',
			[{ kind: 'map', uniq: [64], density: [1] }, hardCircle(200, -60, 2)]
		]
	])('keeps both: %s', (_, parts) => {
		const region = jointRegion(parts);
		expect(region.method).toBe('none');
		expectSound(region);
		const alone = parts.map((part) => jointRegion([part]));
		const sum = alone.reduce((total, one) => total + one.area90Deg2, 0);
		expect(region.area90Deg2 / sum).toBeCloseTo(1, 9);
		for (const one of alone) expect(mocContains(region.moc90, one.centre)).toBe(true);
	});

	it('joins those that agree and lets the odd one stand beside them', () => {
		const pair = [circle(83, -8, 3), circle(84, -8, 2)];
		const region = jointRegion([...pair, circle(123, -8, 2)]);
		const joined = jointRegion(pair);
		expect(region.method).toBe('none');
		expect(region.centre).toEqual(joined.centre);
		expect(region.area90Deg2).toBeCloseTo(
			joined.area90Deg2 + jointRegion([circle(123, -8, 2)]).area90Deg2,
			6
		);
	});

	it('says nothing new when circles as wide as the sky cancel', () => {
		const region = jointRegion([circle(83, -8, 100), circle(263, 8, 100)]);
		expectSound(region);
		expect(region.area50Deg2).toBeCloseTo(41252.96124941928 / 2, 6);
	});

	it('refuses an empty list', () => {
		expect(() => jointRegion([])).toThrow(/parts is empty/);
	});
});

describe('order of arrival', () => {
	const arbitraryShape: fc.Arbitrary<Shape> = fc.oneof(
		{
			weight: 3,
			arbitrary: fc.record({
				kind: fc.constant('circle' as const),
				centre: fc.record({
					raDeg: fc.double({ min: 80, max: 86, noNaN: true }),
					decDeg: fc.double({ min: -10, max: -5, noNaN: true })
				}),
				radiusDeg: fc.double({ min: 0.001, max: 6, noNaN: true }),
				containment: fc.constantFrom(0.5, 0.6827, 0.9)
			})
		},
		{
			weight: 1,
			arbitrary: fc.record({
				kind: fc.constant('hardCircle' as const),
				centre: fc.constantFrom({ raDeg: 83, decDeg: -8 }, { raDeg: 88, decDeg: -8 }),
				radiusDeg: fc.double({ min: 1, max: 6, noNaN: true })
			})
		},
		{
			weight: 1,
			arbitrary: fc.record({
				kind: fc.constant('annulus' as const),
				centre: fc.constant({ raDeg: 60, decDeg: 0 }),
				radiusDeg: fc.double({ min: 20, max: 26, noNaN: true }),
				halfWidthDeg: fc.double({ min: 1, max: 3, noNaN: true }),
				containment: fc.constant(0.9)
			})
		}
	);

	it('does not matter, to the last bit, and every answer is sound', () => {
		fc.assert(
			fc.property(
				fc.array(arbitraryShape, { minLength: 1, maxLength: 4 }),
				fc.integer({ min: 0, max: 3 }),
				(parts, shift) => {
					const region = jointRegion(parts);
					expectSound(region);
					const turned = [...parts.slice(shift), ...parts.slice(0, shift)].reverse();
					expect(jointRegion(turned)).toEqual(region);
				}
			),
			{ numRuns: 25 }
		);
	}, 120_000);
});
