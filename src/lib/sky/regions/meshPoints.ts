import { toEquatorial } from '../vector';
import type { CellColumns } from './cellColumns';
import type { RegionPoints } from './regionPoints';

const MESH_POINTS_MAX = 3000;

/** At most about 3000 points from normalised cells: neighbours are merged at their common centre of mass. */
export function meshPoints(
	cells: CellColumns,
	probability: Float64Array,
	limit = MESH_POINTS_MAX
): RegionPoints {
	let order = cells.finest;
	while (order > 0 && mergedCount(cells, order) > limit) order -= 1;
	const side = 4 ** (cells.finest - order);
	const points: RegionPoints = { raDeg: [], decDeg: [], probability: [] };
	let group = -1;
	let sum = { x: 0, y: 0, z: 0 };
	let held = 0;
	const close = () => {
		if (!(held > 0)) return;
		const { raDeg, decDeg } = toEquatorial(sum);
		points.raDeg.push(raDeg);
		points.decDeg.push(decDeg);
		points.probability.push(held);
	};
	for (let i = 0; i < probability.length; i++) {
		// A cell coarser than `order` begins a group of its own, which no other cell shares.
		const at = Math.floor((cells.start[i] ?? 0) / side);
		if (at !== group) {
			close();
			group = at;
			sum = { x: 0, y: 0, z: 0 };
			held = 0;
		}
		const p = probability[i] ?? 0;
		sum.x += p * (cells.x[i] ?? 0);
		sum.y += p * (cells.y[i] ?? 0);
		sum.z += p * (cells.z[i] ?? 0);
		held += p;
	}
	close();
	return points;
}

/** How many cells there are once those finer than `order` are merged into their parents there. */
function mergedCount({ finest, start }: CellColumns, order: number): number {
	const side = 4 ** (finest - order);
	let count = 0;
	let last = -1;
	for (let i = 0; i < start.length; i++) {
		const at = Math.floor((start[i] ?? 0) / side);
		if (at !== last) count++;
		last = at;
	}
	return count;
}
