import fc from 'fast-check';
import { expect, it } from 'vitest';
import { sortedIndex } from './sortedIndex';

// Outside authority: the language's own stable sort.
it('is the index by which Array.prototype.sort sorts', () => {
	fc.assert(
		fc.property(fc.array(fc.integer({ min: 0, max: 50 }), { maxLength: 200 }), (list) => {
			const keys = Float64Array.from(list);
			const expected = list.map((_, i) => i).sort((a, b) => list[a]! - list[b]!);
			expect([...sortedIndex(keys)]).toEqual(expected);
		})
	);
});

it('sorts runs one behind the other, falling numbers and nothing', () => {
	expect([...sortedIndex(Float64Array.of(1, 5, 9, 2, 6, 0))]).toEqual([5, 0, 3, 1, 4, 2]);
	expect([...sortedIndex(Float64Array.of(3, 2, 1))]).toEqual([2, 1, 0]);
	expect([...sortedIndex(new Float64Array())]).toEqual([]);
});
