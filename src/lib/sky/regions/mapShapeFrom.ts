import { nest2ring } from '@hscmap/healpix';
import { cellAreaSr, toUniq } from '../healpix/healpix';
import {
	checkedDensity,
	checkedTotal,
	sortedMap,
	type MapCells,
	type SortedMap
} from './density/sortedMap';
import { leanMap, type LeanMap } from './leanMap';
import { MapFault } from './mapFault';
import { FLAT_ORDER_MAX, type MapShape } from './shape';
import { turnedMap } from './turnedMap';

/** Frame in which a map's cells are numbered. */
export type MapFrame = 'icrs' | 'galactic';

/** Any density or probability of every pixel of one order; the unit does not matter, as pixels are of equal area. */
export type FlatMap = ({ order: number } | { nside: number }) & {
	ordering: 'nested' | 'ring';
	frame: MapFrame;
} & ({ density: ArrayLike<number> } | { probability: ArrayLike<number> });

/** Cells of any orders, ICRS unless it says otherwise; `density` per unit of area. */
export type MultiOrderMap = MapCells & { frame?: MapFrame };

/** A probability map as it is given. */
export type MapSource = FlatMap | MultiOrderMap;

/** Most cells of the normal form. */
export const MAP_CELLS_MAX = 100_000;
/** Significant digits of the densities: a half of a digit in the last one is 5e-8 at most. */
const DENSITY_DIGITS = 7;

/**
 * The normal form of a map: UNIQ numbers, NESTED, ICRS, ascending, its density per steradian normalised. Equal
 * siblings are merged without loss; past `cellsMax` cells those that differ least. RING to NESTED is exact;
 * galactic maps are turned to ICRS (ESA SP-1200) on cells half as wide. Negative, infinite or absent values,
 * overlapping cells and a sum of 0 are MapFaults.
 */
export function mapShapeFrom(source: MapSource, cellsMax = MAP_CELLS_MAX): MapShape {
	const given =
		'uniq' in source ? fillFromCells(source, cellsMax) : fillFromPixels(source, cellsMax);
	if (source.frame !== 'galactic') return shapeOf(given.finish().map);
	const lean = leanMap(1, cellsMax);
	turnedMap(given.finish().map, lean);
	return shapeOf(lean.finish().map);
}

function fillFromPixels(source: FlatMap, cellsMax: number): LeanMap {
	const { nside, order } = sizeOf(source);
	const field = 'density' in source ? 'density' : 'probability';
	const values = 'density' in source ? source.density : source.probability;
	const count = 12 * nside * nside;
	if (values.length !== count) {
		throw new MapFault(
			field,
			null,
			`has ${values.length} values; nside ${nside} has ${count} pixels`
		);
	}
	let sum = 0;
	for (let i = 0; i < count; i++) sum += checkedDensity(field, values, i);
	const lean = leanMap(checkedTotal(field, sum) * cellAreaSr(order), cellsMax);
	const ring = source.ordering === 'ring';
	for (let pixel = 0; pixel < count; pixel++) {
		lean.add(order, pixel, values[ring ? nest2ring(nside, pixel) : pixel] ?? 0);
	}
	return lean;
}

function sizeOf(source: FlatMap): { nside: number; order: number } {
	if ('order' in source) {
		const { order } = source;
		if (Number.isInteger(order) && order >= 0 && order <= FLAT_ORDER_MAX) {
			return { nside: 2 ** order, order };
		}
		throw new MapFault('order', null, `is ${order}; it must be whole, from 0 to ${FLAT_ORDER_MAX}`);
	}
	const { nside } = source;
	const order = Math.log2(nside);
	if (Number.isInteger(order) && order >= 0 && order <= FLAT_ORDER_MAX) return { nside, order };
	throw new MapFault(
		'nside',
		null,
		`is ${nside}; it must be a power of 2 from 1 to ${2 ** FLAT_ORDER_MAX}`
	);
}

function fillFromCells(source: MultiOrderMap, cellsMax: number): LeanMap {
	const map = sortedMap(source);
	const lean = leanMap(1, cellsMax);
	const end = 12 * 4 ** map.order;
	const sides = Array.from({ length: map.order + 1 }, (_, order) => 4 ** (map.order - order));
	let reached = 0;
	for (let i = 0; i < map.starts.length; i++) {
		const start = map.starts[i] ?? 0;
		const order = map.orders[i] ?? 0;
		fillGap(lean, map.order, reached, start);
		lean.add(order, start / (sides[order] ?? 1), map.density[i] ?? 0);
		reached = map.ends[i] ?? 0;
	}
	fillGap(lean, map.order, reached, end);
	return lean;
}

/** Empty cells, the largest that fit, for the indices from `at` up to `end` at order `finest`. */
function fillGap(lean: LeanMap, finest: number, at: number, end: number): void {
	while (at < end) {
		let order = finest;
		let side = 1;
		while (order > 0 && at % (4 * side) === 0 && at + 4 * side <= end) {
			order -= 1;
			side *= 4;
		}
		lean.add(order, at / side, 0);
		at += side;
	}
}

function shapeOf({ order, orders, starts, density }: SortedMap): MapShape {
	return {
		kind: 'map',
		uniq: Array.from(starts, (start, i) => {
			const cellOrder = orders[i] ?? 0;
			return toUniq(cellOrder, start / 4 ** (order - cellOrder));
		}),
		density: Array.from(density, (value) => Number(value.toPrecision(DENSITY_DIGITS)))
	};
}
