import type { Equatorial } from '../angle';
import { cornerKey, cornerPoint } from '../healpix/cellCorner';
import { deinterleave } from '../healpix/deepCell';
import { toEquatorial } from '../vector';
import { grownToOrder, mocCells, type MocRanges } from './moc';

type Cell = { order: number; pixel: number };
/** Where the border leads on from each corner. */
type Border = Map<number, number[]>;

/** Cells' sides are drawn at least this fine (0.9°), because those of large cells are no great circles. */
const LEAST_ORDER = 6;
/** Steps along all cells' sides for each edge that is left of them; fewer in every case but huge regions. */
const STEPS_PER_EDGE = 8;

/**
 * Closed rings (first position repeated) around a coverage map in normal form, with the map on their left as
 * seen on the sky: counterclockwise with north up and east left, holes the other way. None for the empty set
 * and the whole sky. The map is grown to cells of a lower order until its border has at most `maxEdges`
 * edges; the rings join the middles of the cells' sides, so that they cut corners, but keep every cell's
 * centre on its side.
 */
export function mocOutline(moc: MocRanges, maxEdges = 2000): Equatorial[][] {
	let grown = moc;
	let cells = mocCells(grown);
	let order = cells.reduce((most, cell) => Math.max(most, cell.order), LEAST_ORDER);
	for (;;) {
		const border = borderOf(cells, order, order > 0 ? maxEdges : Infinity);
		if (border) return ringsOf(border).map((ring) => middles(2 ** order, ring));
		order -= 1;
		grown = grownToOrder(grown, order);
		cells = mocCells(grown);
	}
}

/** What is left of the sides of all cells, in steps of `order`, where no two meet; null if it is too much. */
function borderOf(cells: Cell[], order: number, maxEdges: number): Border | null {
	const steps = cells.reduce((sum, cell) => sum + 4 * 2 ** (order - cell.order), 0);
	if (steps > STEPS_PER_EDGE * maxEdges) return null;
	const border: Border = new Map();
	let edges = 0;
	const step = (from: number, to: number) => {
		const back = border.get(to);
		const opposite = back?.indexOf(from) ?? -1;
		edges += opposite < 0 ? 1 : -1;
		if (opposite >= 0) {
			back?.splice(opposite, 1);
			return;
		}
		const onwards = border.get(from);
		if (onwards) onwards.push(to);
		else border.set(from, [to]);
	};
	for (const cell of cells) walkAround(cell, order, step);
	return edges > maxEdges ? null : border;
}

/** Counterclockwise as seen on the sky: from the north to the east, south and west. */
function walkAround(cell: Cell, order: number, step: (from: number, to: number) => void): void {
	const nside = 2 ** order;
	const size = 2 ** (order - cell.order);
	const facePixels = 4 ** cell.order;
	const face = Math.floor(cell.pixel / facePixels);
	const { x, y } = deinterleave(cell.pixel - face * facePixels);
	const [left, right, low, high] = [x * size, (x + 1) * size, y * size, (y + 1) * size];
	const side = (fromX: number, fromY: number, alongX: number, alongY: number) => {
		let from = cornerKey(nside, face, fromX, fromY);
		for (let i = 1; i <= size; i++) {
			const to = cornerKey(nside, face, fromX + i * alongX, fromY + i * alongY);
			step(from, to);
			from = to;
		}
	};
	side(right, high, 0, -1);
	side(right, low, -1, 0);
	side(left, low, 0, 1);
	side(left, high, 1, 0);
}

/** Follows the border until each ring is closed; where cells touch at a corner, either way on will do. */
function ringsOf(border: Border): number[][] {
	const rings: number[][] = [];
	for (const [start, onwards] of border) {
		while (onwards.length > 0) {
			const ring: number[] = [];
			let at: number | undefined = start;
			do {
				ring.push(at);
				at = border.get(at)?.pop();
			} while (at !== undefined && at !== start);
			rings.push(ring);
		}
	}
	return rings;
}

function middles(nside: number, ring: number[]): Equatorial[] {
	const corners = ring.map((key) => cornerPoint(nside, key));
	const points = corners.map((a, i) => {
		const b = corners[(i + 1) % corners.length] ?? a;
		return toEquatorial({ x: a.x + b.x, y: a.y + b.y, z: a.z + b.z });
	});
	const [first] = points;
	return first ? [...points, first] : points;
}
