import type { Equatorial } from '../angle';
import { cellCorners } from '../healpix/healpix';
import { mocCells, type MocRanges } from '../moc/moc';
import { toEquatorial } from '../vector';

/**
 * Corner polygons of the cells of a coverage map, for drawing; the finest cells are merged outwards into
 * their parents until there are at most `maxCells` (at least 12).
 */
export function cellPolygons(moc: MocRanges, maxCells = 2000): Equatorial[][] {
	let cells = mocCells(moc);
	let finest = cells.reduce((most, cell) => Math.max(most, cell.order), 0);
	while (cells.length > Math.max(12, maxCells) && finest > 0) {
		finest -= 1;
		const seen = new Map<number, { order: number; pixel: number }>();
		for (const { order, pixel } of cells) {
			const to = Math.min(order, finest);
			const parent = { order: to, pixel: Math.floor(pixel / 4 ** (order - to)) };
			seen.set(4 * 4 ** to + parent.pixel, parent);
		}
		cells = [...seen.values()];
	}
	return cells.map(({ order, pixel }) => cellCorners(order, pixel).map(toEquatorial));
}
