import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, type Equatorial } from '../angle';
import { cellKey, cellOfKey, type Lattice } from './cell';

/**
 * Rows of constant declination for rectangles aligned with north; without holes at any declination, poles
 * included. `shift` moves the lattice by a share of the cell in each axis.
 */
export function bandLattice(
	cell: { widthDeg: number; heightDeg: number },
	middle: Equatorial,
	shift: { x: number; y: number }
): Lattice {
	const startDecDeg = Math.max(-89, Math.min(89, middle.decDeg + shift.y * cell.heightDeg));
	const first = bandRow(startDecDeg, cell);
	// Rows are made as far as positions ask for them.
	const north = new RowStack(first, cell);
	const south = new RowStack(mirrored(first), cell);
	return {
		keyOf: (position) => {
			const northern = position.decDeg > first.bottomDeg;
			const index = northern ? north.rowFor(position.decDeg) : south.rowFor(-position.decDeg);
			const { columns } = (northern ? north : south).rows[index]!;
			const turns = normaliseDeg(position.raDeg - middle.raDeg) / 360;
			const column = (Math.round(turns * columns - shift.x) + columns) % columns;
			return cellKey(northern ? index : -index, column);
		},
		centreOf: (key) => {
			const { row: index, column } = cellOfKey(key);
			const row = index >= 0 ? north.rows[index]! : mirrored(south.rows[-index]!);
			return {
				raDeg: normaliseDeg(middle.raDeg + ((column + shift.x) * 360) / row.columns),
				decDeg: row.decDeg
			};
		}
	};
}

/** Rows from the first one northwards, up to the cap around the pole that fits into one field. */
class RowStack {
	readonly rows: Row[];

	constructor(
		first: Row,
		private readonly cell: { widthDeg: number; heightDeg: number }
	) {
		this.rows = [first];
	}

	/** Index of the first row whose band without holes reaches a declination. */
	rowFor(decDeg: number): number {
		while (this.rows.at(-1)!.topDeg < decDeg)
			this.rows.push(rowAbove(this.rows.at(-1)!, this.cell));
		let low = 0;
		let high = this.rows.length - 1;
		while (low < high) {
			const half = (low + high) >> 1;
			if (decDeg <= this.rows[half]!.topDeg) high = half;
			else low = half + 1;
		}
		return low;
	}
}

/** One row: its declination, number of fields around the sky and the band it covers without holes. */
type Row = { decDeg: number; columns: number; bottomDeg: number; topDeg: number };

function mirrored(row: Row): Row {
	return {
		decDeg: -row.decDeg,
		columns: row.columns,
		bottomDeg: -row.topDeg,
		topDeg: -row.bottomDeg
	};
}

/**
 * A field's upper edge is a great circle with tan dec = tan(δ + h/2) cos Δα, its corners are at
 * tan Δα = tan(w/2) / (cos δ ∓ tan(h/2) sin δ): the narrower corner sets the spacing.
 */
function bandRow(decDeg: number, cell: { widthDeg: number; heightDeg: number }): Row {
	const decRad = decDeg * RAD_PER_DEG;
	const halfRad = (cell.heightDeg / 2) * RAD_PER_DEG;
	const x = Math.tan((cell.widthDeg / 2) * RAD_PER_DEG);
	const rise = Math.tan(halfRad) * Math.sin(decRad);
	const narrow = Math.min(
		Math.atan2(x, Math.cos(decRad) + rise),
		Math.atan2(x, Math.cos(decRad) - rise)
	);
	const columns = Math.max(4, Math.ceil(Math.PI / narrow - 1e-9));
	const cosHalf = Math.cos(Math.PI / columns);
	const top = decRad + halfRad;
	const bottom = decRad - halfRad;
	return {
		decDeg,
		columns,
		topDeg: Math.min(top, Math.atan(Math.tan(top) * cosHalf)) * DEG_PER_RAD,
		bottomDeg: Math.max(bottom, Math.atan(Math.tan(bottom) * cosHalf)) * DEG_PER_RAD
	};
}

/** The row above, whose band starts where the one below ends; a single field on the pole once that is enough. */
function rowAbove(below: Row, cell: { widthDeg: number; heightDeg: number }): Row {
	const pole = { decDeg: 90, columns: 1, bottomDeg: below.topDeg, topDeg: 90 };
	const halfDeg = cell.heightDeg / 2;
	if (below.topDeg >= 90 - Math.min(cell.widthDeg, cell.heightDeg) / 2) return pole;
	let row = bandRow(Math.min(below.topDeg + halfDeg, 90 - halfDeg - 1e-6), cell);
	for (let step = 0; step < 6 && row.bottomDeg > below.topDeg + 1e-12; step += 1) {
		row = bandRow(row.decDeg - (row.bottomDeg - below.topDeg), cell);
	}
	return row.topDeg > below.topDeg + 1e-9 ? row : pole;
}
