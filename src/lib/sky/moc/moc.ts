/** Multi-order coverage: sets of sky cells as ranges at order 29 (IVOA MOC 2.0). */
import { SKY_DEG2, type Equatorial } from '../angle';
import { MOC_ORDER, pixelAtMocOrder } from '../healpix/healpix';

/** A set of sky pixels at HEALPix order 29, NESTED, as sorted disjoint half-open ranges. */
export type MocRanges = [start: bigint, end: bigint][];

/** Number of cells at order 29: the end of the whole sky. */
export const MOC_END = 12n << BigInt(2 * MOC_ORDER);

/** The whole sky. */
export const wholeSky: MocRanges = [[0n, MOC_END]];

/** Sorted, disjoint, non-adjacent ranges of the same set; throws a RangeError outside [0, 12·4^29]. */
export function normalForm(ranges: MocRanges): MocRanges {
	for (const [start, end] of ranges) {
		if (start < 0n || end > MOC_END || start > end) {
			throw new RangeError(`range is ${start} to ${end}; it must lie in 0 to ${MOC_END}, in order`);
		}
	}
	const sorted = ranges
		.filter(([start, end]) => end > start)
		.sort((a, b) => (a[0] < b[0] ? -1 : a[0] > b[0] ? 1 : 0));
	const merged: MocRanges = [];
	for (const [start, end] of sorted) {
		const last = merged[merged.length - 1];
		if (last && start <= last[1]) {
			if (end > last[1]) last[1] = end;
		} else merged.push([start, end]);
	}
	return merged;
}

/** The set covered by cells of any order (0 to 24). */
export function mocFromCells(cells: { order: number; pixel: number }[]): MocRanges {
	const finest = cells.reduce((most, cell) => Math.max(most, cell.order), 0);
	// Merged as doubles, exact to order 24, because a bigint for every cell would take most of the time.
	const starts = Float64Array.from(cells, ({ order, pixel }) => pixel * 4 ** (finest - order));
	const sizes = Float64Array.from(cells, ({ order }) => 4 ** (finest - order));
	const index = Uint32Array.from(starts.keys());
	index.sort((a, b) => (starts[a] ?? 0) - (starts[b] ?? 0));
	return mocFromSorted(
		finest,
		Float64Array.from(index, (i) => starts[i] ?? 0),
		Float64Array.from(index, (i) => (starts[i] ?? 0) + (sizes[i] ?? 0))
	);
}

/** The set of half-open ranges of indices at `order` (0 to 24), sorted by their starts; they may overlap. */
export function mocFromSorted(order: number, starts: Float64Array, ends: Float64Array): MocRanges {
	const shift = BigInt(2 * (MOC_ORDER - order));
	const ranges: MocRanges = [];
	let from = 0;
	let to = 0;
	const close = () => {
		if (to > from) ranges.push([BigInt(from) << shift, BigInt(to) << shift]);
	};
	for (let i = 0; i < starts.length; i++) {
		const start = starts[i] ?? 0;
		if (start > to) {
			close();
			from = to = start;
		}
		to = Math.max(to, ends[i] ?? 0);
	}
	close();
	return ranges;
}

/** The set grown to whole cells of `order` (0 to 29); in normal form. */
export function grownToOrder(set: MocRanges, order: number): MocRanges {
	const bits = BigInt(2 * (MOC_ORDER - order));
	return normalForm(
		set.map(([start, end]) => [(start >> bits) << bits, -((-end >> bits) << bits)])
	);
}

/** The set grown to whole cells of coarser orders until it has at most `maxRanges` ranges (at least 12). */
export function coarsened(set: MocRanges, maxRanges: number): MocRanges {
	let grown = set;
	for (let order = MOC_ORDER - 1; grown.length > Math.max(12, maxRanges); order--) {
		grown = grownToOrder(set, order);
	}
	return grown;
}

/** Every position in any of the sets. */
export function union(...sets: MocRanges[]): MocRanges {
	return normalForm(sets.flat());
}

/** Every position in both sets; both in normal form. */
export function intersection(a: MocRanges, b: MocRanges): MocRanges {
	const common: MocRanges = [];
	let i = 0;
	let j = 0;
	for (;;) {
		const left = a[i];
		const right = b[j];
		if (!left || !right) return common;
		const start = left[0] > right[0] ? left[0] : right[0];
		const end = left[1] < right[1] ? left[1] : right[1];
		if (start < end) common.push([start, end]);
		if (left[1] < right[1]) i++;
		else j++;
	}
}

/** The rest of the sky; the set in normal form. */
export function complement(set: MocRanges): MocRanges {
	const rest: MocRanges = [];
	let next = 0n;
	for (const [start, end] of set) {
		if (start > next) rest.push([next, start]);
		next = end;
	}
	if (next < MOC_END) rest.push([next, MOC_END]);
	return rest;
}

/** Every position in `a` and not in `b`; both in normal form. */
export function difference(a: MocRanges, b: MocRanges): MocRanges {
	return intersection(a, complement(b));
}

/** Whether the sets have a position in common; both in normal form. */
export function overlaps(a: MocRanges, b: MocRanges): boolean {
	return intersection(a, b).length > 0;
}

/** Share of the whole sky, 0 to 1; the set in normal form. */
export function skyFraction(set: MocRanges): number {
	let cells = 0n;
	for (const [start, end] of set) cells += end - start;
	return Number(cells) / Number(MOC_END);
}

/** Area in square degrees; the set in normal form. */
export function mocAreaDeg2(set: MocRanges): number {
	return skyFraction(set) * SKY_DEG2;
}

/** Whether a position lies in the set (in normal form), to the cell of order 29 (0.4 milliarcseconds). */
export function mocContains(set: MocRanges, position: Equatorial): boolean {
	const pixel = pixelAtMocOrder(position);
	let low = 0;
	let high = set.length;
	while (low < high) {
		const middle = (low + high) >> 1;
		if ((set[middle]?.[1] ?? 0n) <= pixel) low = middle + 1;
		else high = middle;
	}
	const range = set[low];
	return range !== undefined && range[0] <= pixel;
}

/**
 * The largest cells that make up the set (in normal form), in order of position. Orders above 24, whose
 * indices a double can't hold, are rounded outwards to the order-24 cell.
 */
export function mocCells(set: MocRanges): { order: number; pixel: number }[] {
	const cells: { order: number; pixel: number }[] = [];
	const fine = BigInt(2 * (MOC_ORDER - 24));
	let reached = 0n;
	for (const [start, end] of set) {
		let at = (start >> fine) << fine;
		if (at < reached) at = reached;
		const stop = -((-end >> fine) << fine);
		while (at < stop) {
			let order = 24;
			let size = 1n << fine;
			while (order > 0 && at % (size * 4n) === 0n && at + size * 4n <= stop) {
				order -= 1;
				size *= 4n;
			}
			cells.push({ order, pixel: Number(at / size) });
			at += size;
		}
		reached = at > reached ? at : reached;
	}
	return cells;
}
