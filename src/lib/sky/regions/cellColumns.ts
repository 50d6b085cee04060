import { cellAreaSr } from '../healpix/healpix';
import { norm, normalise, type Vector } from '../vector';
import type { MeshCell } from './mesh';

/**
 * A normalised density on disjoint cells, in columns and in order of position: a map has so many cells that
 * an object for each would take most of the time and memory.
 */
export type CellColumns = {
	/** Finest order among the cells, in whose indices `start` counts. */
	finest: number;
	order: Uint8Array;
	/** Index at order `finest` of the first cell that the cell holds. */
	start: Float64Array;
	/** Per steradian, normalised. */
	density: Float64Array;
	/** The unit vector of each cell's centre. */
	x: Float64Array;
	y: Float64Array;
	z: Float64Array;
};

/** Empty columns for `count` cells. */
export function emptyColumns(count: number, finest: number): CellColumns {
	const column = () => new Float64Array(count);
	return {
		finest,
		order: new Uint8Array(count),
		start: column(),
		density: column(),
		x: column(),
		y: column(),
		z: column()
	};
}

/** The cells of a mesh as columns. */
export function columnsOf(cells: MeshCell[]): CellColumns {
	const finest = cells.reduce((most, cell) => Math.max(most, cell.order), 0);
	const starts = Float64Array.from(cells, ({ order, pixel }) => pixel * 4 ** (finest - order));
	const index = Uint32Array.from(starts.keys());
	index.sort((a, b) => (starts[a] ?? 0) - (starts[b] ?? 0));
	const columns = emptyColumns(cells.length, finest);
	index.forEach((from, to) => {
		const cell = cells[from];
		if (!cell) return;
		columns.order[to] = cell.order;
		columns.start[to] = starts[from] ?? 0;
		columns.density[to] = cell.density;
		columns.x[to] = cell.at.x;
		columns.y[to] = cell.at.y;
		columns.z[to] = cell.at.z;
	});
	return columns;
}

/** Probability in each cell. */
export function probabilityColumn({ density, order }: CellColumns): Float64Array {
	return density.map((value, i) => value * cellAreaSr(order[i] ?? 0));
}

/** Unit vector of one cell's centre. */
export function vectorAt({ x, y, z }: CellColumns, i: number): Vector {
	return { x: x[i] ?? 0, y: y[i] ?? 0, z: z[i] ?? 0 };
}

/** Direction of the centre of mass; of the first cell where the mass balances about the Earth's middle. */
export function centreOfMass(cells: CellColumns, probability: Float64Array): Vector {
	const sum = { x: 0, y: 0, z: 0 };
	for (let i = 0; i < probability.length; i++) {
		const p = probability[i] ?? 0;
		sum.x += p * (cells.x[i] ?? 0);
		sum.y += p * (cells.y[i] ?? 0);
		sum.z += p * (cells.z[i] ?? 0);
	}
	// A full ring or sky has its centre of mass in the middle of the Earth: any cell will do then.
	if (norm(sum) > 1e-9) return normalise(sum);
	return probability.length > 0 ? vectorAt(cells, 0) : { x: 1, y: 0, z: 0 };
}
