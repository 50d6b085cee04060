import { CELL_ORDER_MAX, cellAreaSr } from '../../healpix/healpix';
import { MapFault } from '../mapFault';
import { sortedIndex } from './sortedIndex';

/** Cells in order of position: index ranges at the map's finest order, their density and probability. */
export type SortedMap = {
	/** The map's finest order. */
	order: number;
	orders: Uint8Array;
	starts: Float64Array;
	ends: Float64Array;
	/** Per steradian, normalised. */
	density: Float64Array;
	/** Probability in cells before i, normalised; one longer than the rest. */
	before: Float64Array;
};

/** Cells in any order: UNIQ numbers and densities. */
export type MapCells = { uniq: ArrayLike<number>; density: ArrayLike<number> };

const UNIQ_END = 16 * 4 ** CELL_ORDER_MAX;
/** Looked up in the inner loops, in which powers would cost more than all the rest. */
const POWERS = Array.from({ length: CELL_ORDER_MAX + 2 }, (_, order) => 4 ** order);

/** A multi-order map sorted, checked and normalised; throws a MapFault that names what is wrong. */
export function sortedMap({ uniq, density: given }: MapCells): SortedMap {
	const count = uniq.length;
	if (count === 0 || given.length !== count) {
		throw new MapFault(
			'density',
			null,
			`has ${given.length} values for ${count} uniq; it must have equally many, above 0`
		);
	}
	const { order, orders: givenOrders, index, starts } = placesOf(uniq);
	const orders = new Uint8Array(count);
	const density = new Float64Array(count);
	for (let i = 0; i < count; i++) {
		const from = index[i] ?? 0;
		orders[i] = givenOrders[from] ?? 0;
		density[i] = checkedDensity('density', given, from);
	}
	for (let i = 1; i < count; i++) {
		const end = (starts[i - 1] ?? 0) + (POWERS[order - (orders[i - 1] ?? 0)] ?? 0);
		if (end > (starts[i] ?? 0)) {
			const from = index[i] ?? 0;
			throw new MapFault('uniq', from, `is ${uniq[from]}; it overlaps another cell of the map`);
		}
	}
	return normalisedMap(order, orders, starts, density);
}

/** One density or probability of a map, which must be finite and not negative. */
export function checkedDensity(
	field: 'density' | 'probability',
	values: ArrayLike<number>,
	i: number
): number {
	const value = values[i] ?? NaN;
	if (value >= 0 && value < Infinity) return value;
	throw new MapFault(field, i, `is ${value}; it must be finite and at least 0`);
}

/** Sorted disjoint cells as a map; `density`, in any unit, becomes normalised in place. */
export function normalisedMap(
	order: number,
	orders: Uint8Array,
	starts: Float64Array,
	density: Float64Array
): SortedMap {
	const count = starts.length;
	const ends = new Float64Array(count);
	for (let i = 0; i < count; i++) {
		ends[i] = (starts[i] ?? 0) + (POWERS[order - (orders[i] ?? 0)] ?? 0);
	}
	const before = new Float64Array(count + 1);
	for (let i = 0; i < count; i++) {
		before[i + 1] = (before[i] ?? 0) + (density[i] ?? 0) * cellAreaSr(orders[i] ?? 0);
	}
	const total = checkedTotal('density', before[count] ?? 0);
	for (let i = 0; i < count; i++) density[i] = (density[i] ?? 0) / total;
	for (let i = 0; i <= count; i++) before[i] = (before[i] ?? 0) / total;
	return { order, orders, starts, ends, density, before };
}

/** The sum of a map's values, which must be finite and above 0. */
export function checkedTotal(field: 'density' | 'probability', total: number): number {
	if (!(total > 0)) throw new MapFault(field, null, 'is 0 everywhere; a map must hold probability');
	if (total === Infinity) throw new MapFault(field, null, 'is so large that its sum overflows');
	return total;
}

/** Orders as given; the index that sorts the cells, and their first indices at the finest order in that order. */
function placesOf(uniq: ArrayLike<number>) {
	const count = uniq.length;
	const orders = new Uint8Array(count);
	const pixels = new Float64Array(count);
	let order = 0;
	let own = 0;
	for (let i = 0; i < count; i++) {
		const value = uniq[i] ?? NaN;
		if (!(Number.isSafeInteger(value) && value >= 4 && value < UNIQ_END)) {
			throw new MapFault(
				'uniq',
				i,
				`is ${value}; it must be a whole number from 4 to 16 · 4^24 − 1`
			);
		}
		// Most cells are of the order of the one before.
		while (4 * (POWERS[own] ?? 0) > value) own--;
		while (4 * (POWERS[own + 1] ?? Infinity) <= value) own++;
		orders[i] = own;
		pixels[i] = value - 4 * (POWERS[own] ?? 0);
		if (own > order) order = own;
	}
	for (let i = 0; i < count; i++) {
		pixels[i] = (pixels[i] ?? 0) * (POWERS[order - (orders[i] ?? 0)] ?? 0);
	}
	const index = sortedIndex(pixels);
	const starts = new Float64Array(count);
	for (let i = 0; i < count; i++) starts[i] = pixels[index[i] ?? 0] ?? 0;
	return { order, orders, index, starts };
}
