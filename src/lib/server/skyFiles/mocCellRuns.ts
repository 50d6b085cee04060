import { MOC_ORDER } from '../../sky/healpix/healpix';
import type { MocRanges } from '../../sky/moc/moc';

/** Cells of one order in a row, both ends included. */
export type CellRun = { first: bigint; last: bigint };

/** The largest cells that make up a set in normal form, exact to order 29: runs by order, coarsest first. */
export function mocCellRuns(set: MocRanges): { order: number; runs: CellRun[] }[] {
	const byOrder = Array.from({ length: MOC_ORDER + 1 }, (): CellRun[] => []);
	for (const [start, end] of set) {
		let at = start;
		while (at < end) {
			let order = MOC_ORDER;
			let size = 1n;
			while (order > 0 && at % (size * 4n) === 0n && at + size * 4n <= end) {
				order -= 1;
				size *= 4n;
			}
			const first = at / size;
			// All cells of this size up to where the next larger one begins, or the range's end.
			const larger = (at / (size * 4n) + 1n) * size * 4n;
			const stop = order === 0 || larger > end ? end : larger;
			const last = first + (stop - at) / size - 1n;
			const runs = byOrder[order];
			const before = runs?.at(-1);
			if (before && before.last + 1n === first) before.last = last;
			else runs?.push({ first, last });
			at = (last + 1n) * size;
		}
	}
	return byOrder.flatMap((runs, order) => (runs.length > 0 ? [{ order, runs }] : []));
}
