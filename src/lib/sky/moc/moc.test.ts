import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import example from '../../../../fixtures/sky/moc-2.0-examples.json';
import { cellMocRange, fromUniq, toUniq } from '../healpix/healpix';
import { arbitraryPosition, seededDraws } from '../testing/arbitraryPosition';
import { offset } from '../vector';
import { coneMoc } from './coneMoc';
import {
	coarsened,
	complement,
	difference,
	intersection,
	MOC_END,
	mocAreaDeg2,
	mocCells,
	mocContains,
	mocFromCells,
	normalForm,
	overlaps,
	skyFraction,
	union,
	wholeSky,
	type MocRanges
} from './moc';

/** Reads `1/1 2 4 2/12-14` into ranges. */
function fromText(text: string): MocRanges {
	const cells: { order: number; pixel: number }[] = [];
	let order = 0;
	for (const word of text.split(/\s+/)) {
		const [, prefix, body] = /^(?:(\d+)\/)?(.*)$/.exec(word) ?? [];
		if (prefix) order = Number(prefix);
		if (!body) continue;
		const [from = NaN, to = from] = body.split('-').map(Number);
		for (let pixel = from; pixel <= to; pixel++) cells.push({ order, pixel });
	}
	return mocFromCells(cells);
}

const a = fromText(example.ascii_smoc);
const { derived } = example;

describe('the example of IVOA MOC 2.0', () => {
	it('has the standard’s ranges, NUNIQ cells and area', () => {
		expect(a).toEqual(derived.ranges_order29.map((range) => range.map(BigInt)));
		expect(
			mocCells(a)
				.map(({ order, pixel }) => toUniq(order, pixel))
				.sort((x, y) => x - y)
		).toEqual(derived.nuniq);
		expect(mocFromCells(derived.nuniq.map(fromUniq))).toEqual(a);
		expect(skyFraction(a)).toBe(derived.sky_fraction);
		expect(mocAreaDeg2(a)).toBeCloseTo(derived.area_deg2, 5);
	});

	it('has the same ranges at orders 2 and 8, and the same cells in JSON', () => {
		for (const [order, ranges] of [
			[2, derived.ranges_order2],
			[8, derived.ranges_order8]
		] as const) {
			const shift = BigInt(2 * (29 - order));
			expect(a).toEqual(ranges.map((range) => range.map((cell) => BigInt(cell) << shift)));
		}
		const cells = Object.entries(JSON.parse(example.json_smoc) as Record<string, number[]>).flatMap(
			([order, pixels]) => pixels.map((pixel) => ({ order: Number(order), pixel }))
		);
		expect(mocFromCells(cells)).toEqual(a);
		expect(mocCells(a)).toEqual(
			cells.sort((x, y) => x.pixel * 4 ** -x.order - y.pixel * 4 ** -y.order)
		);
	});

	it('has the derived complement, intersection, union and difference', () => {
		const b = fromText(derived.B);
		expect(complement(a)).toEqual(fromText(derived.complement_order2));
		expect(intersection(a, b)).toEqual(fromText(derived.A_and_B));
		expect(union(a, b)).toEqual(fromText(derived.A_or_B));
		expect(difference(a, b)).toEqual(fromText(derived.A_minus_B));
		expect(overlaps(a, b)).toBe(true);
		expect(overlaps(a, complement(a))).toBe(false);
	});
});

const arbitraryMoc = fc
	.array(
		fc.integer({ min: 0, max: 6 }).chain((order) =>
			fc.record({
				order: fc.constant(order),
				pixel: fc.integer({ min: 0, max: 12 * 4 ** order - 1 })
			})
		),
		{ maxLength: 40 }
	)
	.map(mocFromCells);

describe('sets of sky', () => {
	it('obey the laws of sets', () => {
		fc.assert(
			fc.property(arbitraryMoc, arbitraryMoc, arbitraryPosition, (left, right, position) => {
				expect(complement(complement(left))).toEqual(left);
				expect(union(left, complement(left))).toEqual(wholeSky);
				expect(complement(union(left, right))).toEqual(
					intersection(complement(left), complement(right))
				);
				expect(difference(left, right)).toEqual(intersection(left, complement(right)));
				expect(normalForm([...right, ...left])).toEqual(union(left, right));
				const inLeft = mocContains(left, position);
				const inRight = mocContains(right, position);
				expect(mocContains(union(left, right), position)).toBe(inLeft || inRight);
				expect(mocContains(intersection(left, right), position)).toBe(inLeft && inRight);
				expect(mocContains(difference(left, right), position)).toBe(inLeft && !inRight);
				expect(mocFromCells(mocCells(left))).toEqual(left);
			}),
			{ numRuns: 60 }
		);
	});

	it('merges adjacent and overlapping ranges, drops empty ones, and refuses the impossible', () => {
		expect(
			normalForm([
				[5n, 9n],
				[0n, 3n],
				[3n, 4n],
				[8n, 12n],
				[20n, 20n]
			])
		).toEqual([
			[0n, 4n],
			[5n, 12n]
		]);
		expect(() => normalForm([[0n, MOC_END + 1n]])).toThrow(/range is 0/);
		expect(() => normalForm([[7n, 5n]])).toThrow(RangeError);
	});

	it('grows to fewer ranges without losing a cell', () => {
		const cells = Array.from({ length: 500 }, (_, i) => ({ order: 8, pixel: 37 * i }));
		const many = mocFromCells(cells);
		const few = coarsened(many, 100);
		expect(few.length).toBeLessThanOrEqual(100);
		expect(difference(many, few)).toEqual([]);
		expect(cells.every(({ order, pixel }) => overlaps(few, [cellMocRange(order, pixel)]))).toBe(
			true
		);
	});
});

describe('coverage of a cone', () => {
	it.each([
		[83, -8, 3],
		[0, 90, 2],
		[10, -89.9, 1],
		[359.99, 41.8, 0.033],
		[200, 0, 2 / 3600],
		[50, 20, 0.2 / 3600],
		[120, -60, 140]
	])('holds every position within %d %+d, %d° and little else', (raDeg, decDeg, radiusDeg) => {
		const centre = { raDeg, decDeg };
		const moc = coneMoc(centre, radiusDeg);
		const draw = seededDraws(11);
		for (let i = 0; i < 2000; i++) {
			const position = offset(centre, radiusDeg * Math.sqrt(draw()) * 0.999999, 360 * draw());
			expect(mocContains(moc, position)).toBe(true);
			if (radiusDeg < 90)
				expect(mocContains(moc, offset(centre, radiusDeg * 1.13, 360 * draw()))).toBe(false);
		}
		expect(moc.length).toBeLessThan(400);
	});
});
