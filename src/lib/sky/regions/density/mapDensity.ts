import { cellAreaSr, fromUniq, pixelAt } from '../../healpix/healpix';
import { toEquatorial } from '../../vector';
import type { MapShape } from '../shape';
import type { CellPlace, Density } from './density';

/** Cells in order of position: index ranges at the map's finest order, their log density and probability. */
type SortedMap = {
	order: number;
	starts: Float64Array;
	ends: Float64Array;
	logs: Float64Array;
	/** Probability in cells before i, normalised; one longer than the rest. */
	before: Float64Array;
};

/** Density of a multi-order map, normalised to 1 over the sky; sky that no cell covers has none. */
export function mapDensity(shape: MapShape): Density {
	const map = sortedMap(shape);
	const { starts, ends, logs, before } = map;
	const greatest = rangeMaximum(logs);
	let lastCell: object | null = null;
	let last = { low: 0, high: 0, from: 0, to: 0 };
	// Bound, value and side of one cell are asked for in turn: look it up once.
	const span = (cell: { order: number; pixel: number }) => {
		if (cell === lastCell) return last;
		const scale = 4 ** (map.order - cell.order);
		const low = scale >= 1 ? cell.pixel * scale : Math.floor(cell.pixel * scale);
		const high = scale >= 1 ? low + scale : low + 1;
		const from = firstAfter(ends, low);
		const to =
			scale > 1 ? firstAtLeast(starts, high) : (starts[from] ?? Infinity) < high ? from + 1 : from;
		lastCell = cell;
		last = { low, high, from, to };
		return last;
	};
	const logAt: Density['logAt'] = (direction) => {
		const { from, to } = span({
			order: map.order,
			pixel: pixelAt(map.order, toEquatorial(direction))
		});
		return from < to ? (logs[from] ?? -Infinity) : -Infinity;
	};
	const logIn = (cell: CellPlace) => {
		const { from, to } = span(cell);
		if (from >= to) return -Infinity;
		// A single cell may be larger than the mesh cell: its density is the answer then.
		if (to - from === 1 && cell.order >= orderOfRange(map, from)) return logs[from] ?? -Infinity;
		const probability = (before[to] ?? 0) - (before[from] ?? 0);
		return probability > 0 ? Math.log(probability / cellAreaSr(cell.order)) : -Infinity;
	};
	return {
		logAt,
		logIn,
		logBound: (cell) => {
			const { from, to } = span(cell);
			return from < to ? greatest(from, to) : -Infinity;
		},
		logPeak: greatest(0, logs.length),
		sideRad: (cell) => {
			const { low, high, from, to } = span(cell);
			if (from >= to) return Infinity;
			const filled = (starts[from] ?? 0) <= low && (ends[from] ?? 0) >= high;
			return to - from === 1 && filled ? Infinity : 0;
		}
	};
}

function sortedMap({ uniq, density }: MapShape): SortedMap {
	const count = uniq.length;
	if (count === 0 || density.length !== count) {
		throw new RangeError(
			`map has ${count} uniq and ${density.length} density; it must have equally many, above 0`
		);
	}
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
	const starts = new Float64Array(count);
	const ends = new Float64Array(count);
	const logs = new Float64Array(count);
	const before = new Float64Array(count + 1);
	for (let i = 0; i < count; i++) {
		const from = index[i] ?? 0;
		const cellOrder = orders[from] ?? 0;
		const value = density[from] ?? NaN;
		if (!(value >= 0 && value < Infinity)) {
			throw new RangeError(`density[${from}] is ${value}; it must be finite and at least 0`);
		}
		const start = pixels[from] ?? 0;
		if (i > 0 && (ends[i - 1] ?? 0) > start) {
			throw new RangeError(`uniq[${from}] is ${uniq[from]}; it overlaps another cell of the map`);
		}
		starts[i] = start;
		ends[i] = start + 4 ** (order - cellOrder);
		logs[i] = value;
		before[i + 1] = (before[i] ?? 0) + value * cellAreaSr(cellOrder);
	}
	const total = before[count] ?? 0;
	if (!(total > 0)) throw new RangeError('density is 0 everywhere; a map must hold probability');
	for (let i = 0; i < count; i++) logs[i] = Math.log((logs[i] ?? 0) / total);
	for (let i = 0; i <= count; i++) before[i] = (before[i] ?? 0) / total;
	return { order, starts, ends, logs, before };
}

function orderOfRange({ order, starts, ends }: SortedMap, i: number): number {
	return order - Math.round(Math.log2((ends[i] ?? 0) - (starts[i] ?? 0)) / 2);
}

/** First i whose value is above `bound`. */
function firstAfter(values: Float64Array, bound: number): number {
	let low = 0;
	let high = values.length;
	while (low < high) {
		const middle = (low + high) >> 1;
		if ((values[middle] ?? 0) > bound) high = middle;
		else low = middle + 1;
	}
	return low;
}

/** First i whose value is at least `bound`. */
function firstAtLeast(values: Float64Array, bound: number): number {
	let low = 0;
	let high = values.length;
	while (low < high) {
		const middle = (low + high) >> 1;
		if ((values[middle] ?? 0) >= bound) high = middle;
		else low = middle + 1;
	}
	return low;
}

/** Greatest value in any half-open range, in logarithmic time (a binary tree in one array). */
function rangeMaximum(values: Float64Array): (from: number, to: number) => number {
	const count = values.length;
	const tree = new Float64Array(2 * count);
	tree.set(values, count);
	for (let i = count - 1; i > 0; i--) {
		tree[i] = Math.max(tree[2 * i] ?? -Infinity, tree[2 * i + 1] ?? -Infinity);
	}
	return (from, to) => {
		let best = -Infinity;
		for (let low = from + count, high = to + count; low < high; low >>= 1, high >>= 1) {
			if (low & 1) best = Math.max(best, tree[low++] ?? -Infinity);
			if (high & 1) best = Math.max(best, tree[--high] ?? -Infinity);
		}
		return best;
	};
}
