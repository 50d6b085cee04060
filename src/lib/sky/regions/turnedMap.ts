import { toGalactic } from '../galactic';
import {
	CELL_ORDER_MAX,
	cellAreaSr,
	cellPoint,
	cellRadiusRad,
	cellVector,
	pixelAt
} from '../healpix/healpix';
import { toEquatorial, type Vector } from '../vector';
import type { SortedMap } from './density/sortedMap';
import type { LeanMap } from './leanMap';

/** Cells that straddle borders of the given map's cells are divided this many orders past those cells. */
const EXTRA_ORDERS = 1;
/** Points along a cell's side at which the given map is read. */
const SAMPLES = 4;
/** A cell with less probability than this is not divided further. */
const NEGLIGIBLE_PROBABILITY = 1e-8;
/** A cell with less than this is not divided past the given map's cells. */
const SMALL_PROBABILITY = 2e-6;

/** A cell of the galactic map's tree that may touch the cell at hand: `from` to `to` are the map's cells in it. */
type Node = { order: number; pixel: number; from: number; to: number; at: Vector };

const ORDERS = Array.from({ length: CELL_ORDER_MAX + 1 }, (_, order) => order);
const REACH_RAD = ORDERS.map(cellRadiusRad);
/** Greatest squared distance between the centres of cells of two orders that touch. */
const TOUCHING_CHORD2 = ORDERS.map((a) =>
	ORDERS.map((b) => {
		const reachRad = (REACH_RAD[a] ?? 0) + (REACH_RAD[b] ?? 0);
		return (2 * Math.sin(Math.min(reachRad, Math.PI) / 2)) ** 2 * (1 + 1e-12);
	})
);

/**
 * Puts a map of galactic cells into ICRS cells: each takes the mean of the map over 16 points in it, on cells
 * half as wide as the map's own wherever its density changes. A cell that lies in one of the map's takes its density.
 */
export function turnedMap(map: SortedMap, lean: LeanMap): void {
	const whole = { from: 0, to: map.starts.length };
	const roots = Array.from({ length: 12 }, (_, pixel) =>
		nodeAt(map, 0, pixel, cellVector(0, pixel), whole)
	);
	const visit = (order: number, pixel: number, parents: Node[]) => {
		const nodes = touching(map, order, cellVector(order, pixel), parents);
		const [first] = nodes;
		const leaves = nodes.every((node) => isLeaf(map, node));
		const level = first ? densityOf(map, first) : 0;
		if (leaves && nodes.every((node) => densityOf(map, node) === level)) {
			lean.add(order, pixel, level);
		} else if (mustDivide(map, order, nodes, leaves)) {
			for (let child = 4 * pixel; child < 4 * pixel + 4; child++) visit(order + 1, child, nodes);
		} else lean.add(order, pixel, meanIn(map, order, pixel));
	};
	for (let pixel = 0; pixel < 12; pixel++) visit(0, pixel, roots);
}

function mustDivide(map: SortedMap, order: number, nodes: Node[], leaves: boolean): boolean {
	let held = 0;
	let finest = 0;
	for (const node of nodes) {
		const { from, to } = node;
		const inNode = (map.before[to] ?? 0) - (map.before[from] ?? 0);
		held += Math.min(inNode, isLeaf(map, node) ? densityOf(map, node) * cellAreaSr(order) : inNode);
		if (from < to) finest = Math.max(finest, map.orders[from] ?? 0);
	}
	if (held < NEGLIGIBLE_PROBABILITY || order === CELL_ORDER_MAX) return false;
	if (!leaves) return true;
	return order < finest + (held < SMALL_PROBABILITY ? 0 : EXTRA_ORDERS);
}

/** Those of the nodes, or of their children where they are coarser than `order`, that touch a cell's circle. */
function touching(map: SortedMap, order: number, centre: Vector, parents: Node[]): Node[] {
	const { x, y, z } = toGalactic(centre);
	const near: Node[] = [];
	const isNear = (at: Vector, nodeOrder: number) =>
		(at.x - x) ** 2 + (at.y - y) ** 2 + (at.z - z) ** 2 <=
		(TOUCHING_CHORD2[order]?.[nodeOrder] ?? Infinity);
	const keep = (node: Node) => {
		if (node.order >= order || isLeaf(map, node)) {
			near.push(node);
			return;
		}
		for (let child = 4 * node.pixel; child < 4 * node.pixel + 4; child++) {
			const at = cellVector(node.order + 1, child);
			if (isNear(at, node.order + 1)) keep(nodeAt(map, node.order + 1, child, at, node));
		}
	};
	for (const node of parents) if (isNear(node.at, node.order)) keep(node);
	return near;
}

function nodeAt(
	map: SortedMap,
	order: number,
	pixel: number,
	at: Vector,
	within: { from: number; to: number }
): Node {
	const side = 4 ** (map.order - order);
	const end = (pixel + 1) * side;
	const from = firstAfter(map.ends, pixel * side, within.from, within.to);
	let to = from;
	if (from < within.to && (map.starts[from] ?? 0) < end) {
		to = (map.ends[from] ?? 0) >= end ? from + 1 : firstAfter(map.starts, end - 1, from, within.to);
	}
	return { order, pixel, from, to, at };
}

/** Whether the map says nothing finer about a node: it is empty, or one of the map's cells or inside it. */
function isLeaf(map: SortedMap, { order, from, to }: Node): boolean {
	return from === to || (to - from === 1 && (map.orders[from] ?? 0) <= order);
}

function densityOf(map: SortedMap, { from, to }: Node): number {
	return from === to ? 0 : (map.density[from] ?? 0);
}

function meanIn(map: SortedMap, order: number, pixel: number): number {
	let sum = 0;
	for (let i = 0; i < SAMPLES; i++) {
		for (let j = 0; j < SAMPLES; j++) {
			const point = cellPoint(order, pixel, (i + 0.5) / SAMPLES, (j + 0.5) / SAMPLES);
			const cell = pixelAt(map.order, toEquatorial(toGalactic(point)));
			const at = firstAfter(map.ends, cell, 0, map.ends.length);
			if ((map.starts[at] ?? Infinity) <= cell) sum += map.density[at] ?? 0;
		}
	}
	return sum / (SAMPLES * SAMPLES);
}

/** First i from `low` up to `high` whose value is above `bound`; `high` if there is none. */
function firstAfter(values: Float64Array, bound: number, low: number, high: number): number {
	while (low < high) {
		const middle = (low + high) >> 1;
		if ((values[middle] ?? 0) > bound) high = middle;
		else low = middle + 1;
	}
	return low;
}
