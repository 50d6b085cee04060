import { cellVector } from '../healpix/healpix';
import { columnsOf, type CellColumns } from './cellColumns';
import type { MeshCell } from './mesh';

/** Normalised cells with a weight; the weights' sum is 1. */
export type WeightedCells = { cells: CellColumns; weight: number };

/** Cells of one of the densities that lie in, or cover, the cell at hand: rows `from` to `to`. */
type Span = WeightedCells & { from: number; to: number };

/** The weighted sum of densities on disjoint cells, each as fine as the finest of them there. */
export function mixedCells(densities: WeightedCells[]): CellColumns {
	const mixed: MeshCell[] = [];
	const visit = (order: number, pixel: number, spans: Span[]) => {
		const here = spans
			.map((span) => narrowed(span, order, pixel))
			.filter(({ from, to }) => from < to);
		if (here.length === 0) return;
		const isFiner = ({ cells, from, to }: Span) =>
			to - from > 1 || (cells.order[from] ?? 0) > order;
		if (here.some(isFiner)) {
			for (let child = 4 * pixel; child < 4 * pixel + 4; child++) visit(order + 1, child, here);
			return;
		}
		const density = here.reduce(
			(sum, { cells, from, weight }) => sum + weight * (cells.density[from] ?? 0),
			0
		);
		mixed.push({ order, pixel, at: cellVector(order, pixel), density });
	};
	const whole = densities.map((one) => ({ ...one, from: 0, to: one.cells.start.length }));
	for (let pixel = 0; pixel < 12; pixel++) visit(0, pixel, whole);
	return columnsOf(mixed);
}

function narrowed(span: Span, order: number, pixel: number): Span {
	const { cells } = span;
	const side = 4 ** (cells.finest - order);
	const start = pixel * side;
	const end = start + side;
	const ends = (i: number) => (cells.start[i] ?? 0) + 4 ** (cells.finest - (cells.order[i] ?? 0));
	const from = firstWhere(span.from, span.to, (i) => ends(i) > start);
	return { ...span, from, to: firstWhere(from, span.to, (i) => (cells.start[i] ?? 0) >= end) };
}

function firstWhere(from: number, to: number, holds: (i: number) => boolean): number {
	let low = from;
	let high = to;
	while (low < high) {
		const middle = (low + high) >> 1;
		if (holds(middle)) high = middle;
		else low = middle + 1;
	}
	return low;
}
