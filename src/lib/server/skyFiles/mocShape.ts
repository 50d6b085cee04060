import { CELL_ORDER_MAX, MOC_ORDER } from '../../sky/healpix/healpix';
import type { MocRanges } from '../../sky/moc/moc';
import { mapShapeFrom } from '../../sky/regions/mapShapeFrom';
import type { MapShape } from '../../sky/regions/shape';
import { FileFault } from '../fits/fileFault';

/** More cells than any coverage map of a region has. */
const CELLS_MAX = 4_000_000;

/**
 * A coverage map in normal form as a region: the same density everywhere inside. Cells finer than order 24
 * are rounded outwards to it.
 */
export function mocShape(set: MocRanges): MapShape {
	if (set.length === 0) throw new FileFault('coverage map', 'is empty; it must hold a cell');
	const uniq: number[] = [];
	const fine = BigInt(2 * (MOC_ORDER - CELL_ORDER_MAX));
	let reached = 0;
	for (const [start, end] of set) {
		let at = Math.max(reached, Number(start >> fine));
		const stop = Number(-(-end >> fine));
		while (at < stop) {
			let order = CELL_ORDER_MAX;
			let size = 1;
			while (order > 0 && at % (4 * size) === 0 && at + 4 * size <= stop) {
				order -= 1;
				size *= 4;
			}
			uniq.push(4 * 4 ** order + at / size);
			at += size;
		}
		if (uniq.length > CELLS_MAX) {
			throw new FileFault('coverage map', `has more than ${CELLS_MAX} cells`);
		}
		reached = Math.max(reached, at);
	}
	return mapShapeFrom({ uniq, density: new Float32Array(uniq.length).fill(1) });
}
