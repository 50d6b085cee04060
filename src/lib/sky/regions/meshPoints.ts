import { cellAreaSr } from '../healpix/healpix';
import { toEquatorial } from '../vector';
import type { MeshCell } from './mesh';
import type { RegionPoints } from './regionPoints';

const MESH_POINTS_MAX = 3000;

/** At most about 3000 points from normalised mesh cells: neighbours are merged at their common centre of mass. */
export function meshPoints(cells: MeshCell[], limit = MESH_POINTS_MAX): RegionPoints {
	let order = cells.reduce((finest, cell) => Math.max(finest, cell.order), 0);
	while (order > 0 && leastMerged(cells, order) > limit) order -= 1;
	while (order > 0 && mergedCount(cells, order) > limit) order -= 1;
	const groups = new Map<number, { x: number; y: number; z: number; p: number }>();
	for (const cell of cells) {
		const p = cell.density * cellAreaSr(cell.order);
		if (!(p > 0)) continue;
		const key = groupKey(cell, order);
		const group = groups.get(key);
		if (group) {
			group.x += p * cell.at.x;
			group.y += p * cell.at.y;
			group.z += p * cell.at.z;
			group.p += p;
		} else groups.set(key, { x: p * cell.at.x, y: p * cell.at.y, z: p * cell.at.z, p });
	}
	const points: RegionPoints = { raDeg: [], decDeg: [], probability: [] };
	for (const group of groups.values()) {
		const { raDeg, decDeg } = toEquatorial(group);
		points.raDeg.push(raDeg);
		points.decDeg.push(decDeg);
		points.probability.push(group.p);
	}
	return points;
}

/** A lower bound on `mergedCount` that needs no set: every parent filled by its children. */
function leastMerged(cells: MeshCell[], order: number): number {
	return cells.reduce(
		(sum, cell) => sum + (cell.order <= order ? 1 : 4 ** (order - cell.order)),
		0
	);
}

function mergedCount(cells: MeshCell[], order: number): number {
	const keys = new Set<number>();
	for (const cell of cells) keys.add(groupKey(cell, order));
	return keys.size;
}

/** UNIQ number of the cell at `order` or coarser that a cell is merged into. */
function groupKey(cell: MeshCell, order: number): number {
	const to = Math.min(order, cell.order);
	return 4 * 4 ** to + Math.floor(cell.pixel / 4 ** (cell.order - to));
}
