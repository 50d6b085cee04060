import { cellVector } from '../healpix/healpix';
import { emptyColumns, type CellColumns } from './cellColumns';
import type { SortedMap } from './density/sortedMap';
import type { JointRegion } from './jointRegion';
import { columnsRegion } from './meshRegion';

/** Cells with less than this share of the greatest density (e⁻²⁵) hold no probability that matters. */
const NEGLIGIBLE_SHARE = Math.exp(-25);

/** The region of one map alone, from its own cells: there is nothing to multiply and so nothing to refine. */
export function mapRegion(map: SortedMap): JointRegion {
	return columnsRegion(columnsOfMap(map));
}

/** Cells of a map that hold anything that matters, as columns. */
export function columnsOfMap({ order, orders, starts, density }: SortedMap): CellColumns {
	const least = density.reduce((most, value) => Math.max(most, value), 0) * NEGLIGIBLE_SHARE;
	const kept = density.reduce((count, value) => count + (value > least ? 1 : 0), 0);
	const cells = emptyColumns(kept, order);
	let to = 0;
	density.forEach((value, i) => {
		if (!(value > least)) return;
		const cellOrder = orders[i] ?? 0;
		const start = starts[i] ?? 0;
		cells.order[to] = cellOrder;
		cells.start[to] = start;
		cells.density[to] = value;
		const at = cellVector(cellOrder, start / 4 ** (order - cellOrder));
		cells.x[to] = at.x;
		cells.y[to] = at.y;
		cells.z[to] = at.z;
		to++;
	});
	return cells;
}
