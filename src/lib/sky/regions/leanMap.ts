import { cellAreaSr } from '../healpix/healpix';
import { normalisedMap, type SortedMap } from './density/sortedMap';

/** Least share of the probability that a merge of unequal cells may move; doubled until the map fits. */
const LOSS_STEP = 1e-13;

/** A density this much smaller than the mean is none: the whole sky of it would hold as little. */
const NOTHING = 1e-30;

/** Cells put in one after the other, and what became of them. */
export type LeanMap = {
	/** Adds the next cell in order of position; together they must fill the sky, empty ones included. */
	add: (order: number, pixel: number, density: number) => void;
	/** The cells that hold something, normalised, and the share of the probability that merging moved, at most. */
	finish: () => { map: SortedMap; movedShare: number };
};

/**
 * Merges four sibling cells as soon as they are equal, which loses nothing; past `cellsMax` cells also those
 * that differ least, by the probability (of `total`) that moves between them. It never holds more than about
 * twice that many cells, however many come.
 */
export function leanMap(total: number, cellsMax: number): LeanMap {
	const room = 2 * cellsMax + 8;
	const orders = new Uint8Array(room);
	const pixels = new Float64Array(room);
	const density = new Float64Array(room);
	const least = (NOTHING * total) / (4 * Math.PI);
	let count = 0;
	let lossMax = 0;
	let moved = 0;

	const put = (order: number, pixel: number, value: number) => {
		orders[count] = order;
		pixels[count] = pixel;
		density[count++] = value;
		let merged = true;
		while (merged && isLastSibling(pixels[count - 1] ?? 0)) merged = mergeLast();
	};
	const mergeLast = () => {
		const first = count - 4;
		const order = orders[first] ?? 0;
		const pixel = pixels[first] ?? 0;
		if (first < 0 || order === 0) return false;
		for (let i = 1; i < 4; i++) {
			if (orders[first + i] !== order || pixels[first + i] !== pixel + i) return false;
		}
		const a = density[first] ?? 0;
		const b = density[first + 1] ?? 0;
		const c = density[first + 2] ?? 0;
		const d = density[first + 3] ?? 0;
		const equal = a === b && a === c && a === d;
		const mean = equal ? a : (a + b + c + d) / 4;
		const off = Math.abs(a - mean) + Math.abs(b - mean) + Math.abs(c - mean) + Math.abs(d - mean);
		const loss = equal ? 0 : (off / 2) * cellAreaSr(order);
		if (loss > lossMax) return false;
		moved += loss;
		count = first + 1;
		orders[first] = order - 1;
		pixels[first] = pixel / 4;
		density[first] = mean;
		return true;
	};
	const shrink = () => {
		lossMax = Math.max(2 * lossMax, LOSS_STEP * total);
		const held = count;
		count = 0;
		// Every cell is written at or before the place it is read from, so that no copy is needed.
		for (let i = 0; i < held; i++) put(orders[i] ?? 0, pixels[i] ?? 0, density[i] ?? 0);
	};

	return {
		add: (order, pixel, value) => {
			put(order, pixel, value > least ? value : 0);
			while (count > 2 * cellsMax) shrink();
		},
		finish: () => {
			while (count > cellsMax) shrink();
			return { map: fullCells(orders, pixels, density, count), movedShare: moved / total };
		}
	};
}

/** Whether a pixel is the last of four: by division, as the remainder of a double takes several times as long. */
function isLastSibling(pixel: number): boolean {
	return pixel - 4 * Math.floor(pixel / 4) === 3;
}

function fullCells(
	orders: Uint8Array,
	pixels: Float64Array,
	density: Float64Array,
	count: number
): SortedMap {
	const full = Uint32Array.from(density.subarray(0, count).keys()).filter(
		(i) => (density[i] ?? 0) > 0
	);
	const kept = Uint8Array.from(full, (i) => orders[i] ?? 0);
	const finest = kept.reduce((most, order) => Math.max(most, order), 0);
	const starts = Float64Array.from(
		full,
		(i) => (pixels[i] ?? 0) * 4 ** (finest - (orders[i] ?? 0))
	);
	return normalisedMap(
		finest,
		kept,
		starts,
		Float64Array.from(full, (i) => density[i] ?? 0)
	);
}
