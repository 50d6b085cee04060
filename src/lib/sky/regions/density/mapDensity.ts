import { cellAreaSr, pixelAt } from '../../healpix/healpix';
import { toEquatorial } from '../../vector';
import type { CellPlace, Density } from './density';
import type { SortedMap } from './sortedMap';

/** Density of a multi-order map; sky that no cell covers has none. */
export function mapDensity(map: SortedMap): Density {
	const { starts, ends, before } = map;
	const logs = map.density.map(Math.log);
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
		if (to - from === 1 && cell.order >= (map.orders[from] ?? 0)) return logs[from] ?? -Infinity;
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
