import { cellAreaSr, fromUniq } from '../../healpix/healpix';
import type { MapShape } from '../shape';

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

/** A multi-order map sorted, checked and normalised; throws a RangeError that names what is wrong. */
export function sortedMap({ uniq, density: given }: MapShape): SortedMap {
	const count = uniq.length;
	if (count === 0 || given.length !== count) {
		throw new RangeError(
			`map has ${count} uniq and ${given.length} density; it must have equally many, above 0`
		);
	}
	const { order, orders: givenOrders, index, starts } = placesOf(uniq);
	const orders = new Uint8Array(count);
	const ends = new Float64Array(count);
	const density = new Float64Array(count);
	const before = new Float64Array(count + 1);
	for (let i = 0; i < count; i++) {
		const from = index[i] ?? 0;
		const cellOrder = givenOrders[from] ?? 0;
		const value = given[from] ?? NaN;
		if (!(value >= 0 && value < Infinity)) {
			throw new RangeError(`density[${from}] is ${value}; it must be finite and at least 0`);
		}
		const start = starts[i] ?? 0;
		if (i > 0 && (ends[i - 1] ?? 0) > start) {
			throw new RangeError(`uniq[${from}] is ${uniq[from]}; it overlaps another cell of the map`);
		}
		orders[i] = cellOrder;
		ends[i] = start + 4 ** (order - cellOrder);
		density[i] = value;
		before[i + 1] = (before[i] ?? 0) + value * cellAreaSr(cellOrder);
	}
	const total = before[count] ?? 0;
	if (!(total > 0)) throw new RangeError('density is 0 everywhere; a map must hold probability');
	if (total === Infinity) throw new RangeError('density is so large that its sum is not finite');
	for (let i = 0; i < count; i++) density[i] = (density[i] ?? 0) / total;
	for (let i = 0; i <= count; i++) before[i] = (before[i] ?? 0) / total;
	return { order, orders, starts, ends, density, before };
}

/** Orders as given; the index that sorts the cells, and their first indices at the finest order in that order. */
function placesOf(uniq: ArrayLike<number>) {
	const count = uniq.length;
	const orders = new Uint8Array(count);
	const pixels = new Float64Array(count);
	let order = 0;
	for (let i = 0; i < count; i++) {
		const cell = fromUniq(uniq[i] ?? NaN);
		orders[i] = cell.order;
		pixels[i] = cell.pixel;
		if (cell.order > order) order = cell.order;
	}
	const index = new Uint32Array(count);
	let ascending = true;
	for (let i = 0; i < count; i++) {
		index[i] = i;
		pixels[i] = (pixels[i] ?? 0) * 4 ** (order - (orders[i] ?? 0));
		if (i > 0 && (pixels[i - 1] ?? 0) >= (pixels[i] ?? 0)) ascending = false;
	}
	if (!ascending) index.sort((a, b) => (pixels[a] ?? 0) - (pixels[b] ?? 0));
	const starts = ascending ? pixels : Float64Array.from(index, (i) => pixels[i] ?? 0);
	return { order, orders, index, starts };
}
