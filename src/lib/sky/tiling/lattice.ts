import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, type Equatorial } from '../angle';
import { offset, positionAngleDeg, separationDeg } from '../vector';
import type { Detector } from '../visibility/telescope';

/** A regular arrangement of fields: the cell of a position, by key, and the cell's centre. */
export type Lattice = (position: Equatorial) => { key: number; centre: Equatorial };

/** Keys are row × this + column. */
const KEY_STRIDE = 1 << 22;

/** The rectangle or circle that is repeated: the detector itself, or the box around a mosaic. */
export type Cell = {
	round: boolean;
	widthDeg: number;
	heightDeg: number;
	rotationDeg: number;
	offsetXDeg: number;
	offsetYDeg: number;
};

/** The cell to repeat for a field of detectors. */
export function fieldCell(detectors: readonly Detector[]): Cell {
	const [first] = detectors;
	if (!first) throw new RangeError('detectors is empty; a field needs at least one');
	const rotationDeg = first.shape === 'circle' ? 0 : first.rotationDeg;
	if (detectors.length === 1) {
		const round = first.shape === 'circle';
		return {
			round,
			widthDeg: round ? 2 * first.radiusDeg : first.widthDeg,
			heightDeg: round ? 2 * first.radiusDeg : first.heightDeg,
			rotationDeg,
			offsetXDeg: first.offsetXDeg,
			offsetYDeg: first.offsetYDeg
		};
	}
	const half = (detector: Detector, side: 'x' | 'y') =>
		detector.shape === 'circle'
			? detector.radiusDeg
			: (side === 'x' ? detector.widthDeg : detector.heightDeg) / 2;
	const west = Math.min(...detectors.map((d) => d.offsetXDeg - half(d, 'x')));
	const east = Math.max(...detectors.map((d) => d.offsetXDeg + half(d, 'x')));
	const south = Math.min(...detectors.map((d) => d.offsetYDeg - half(d, 'y')));
	const north = Math.max(...detectors.map((d) => d.offsetYDeg + half(d, 'y')));
	return {
		round: false,
		widthDeg: east - west,
		heightDeg: north - south,
		rotationDeg,
		offsetXDeg: (east + west) / 2,
		offsetYDeg: (north + south) / 2
	};
}

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
	return (position) => {
		const northern = position.decDeg > first.bottomDeg;
		const index = northern ? north.rowFor(position.decDeg) : south.rowFor(-position.decDeg);
		const row = (northern ? north : south).rows[index]!;
		const spacingDeg = 360 / row.columns;
		const fromMiddleDeg = normaliseDeg(position.raDeg - middle.raDeg);
		const column = (Math.round(fromMiddleDeg / spacingDeg - shift.x) + row.columns) % row.columns;
		return {
			key: (northern ? index : -index) * KEY_STRIDE + column,
			centre: {
				raDeg: normaliseDeg(middle.raDeg + (column + shift.x) * spacingDeg),
				decDeg: northern ? row.decDeg : -row.decDeg
			}
		};
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

/**
 * A flat lattice around the region's middle, kept at true distances from it: hexagonal for circles, turned for
 * rotated rectangles. Distances across the line of sight shrink away from the middle, so circles leave no
 * holes; rectangles far from the middle turn against the lattice and may.
 */
export function flatLattice(
	cell: Cell,
	middle: Equatorial,
	shift: { x: number; y: number }
): Lattice {
	const [c, s] = [
		Math.cos(cell.rotationDeg * RAD_PER_DEG),
		Math.sin(cell.rotationDeg * RAD_PER_DEG)
	];
	// 1 % less than touching, against rounding and distortion.
	const stepX = 0.99 * (cell.round ? (Math.sqrt(3) / 2) * cell.widthDeg : cell.widthDeg);
	const stepY = 0.99 * (cell.round ? 0.75 * cell.heightDeg : cell.heightDeg);
	return (position) => {
		const distanceDeg = separationDeg(middle, position);
		const angleRad = positionAngleDeg(middle, position) * RAD_PER_DEG;
		const east = distanceDeg * Math.sin(angleRad);
		const north = distanceDeg * Math.cos(angleRad);
		const x = (east * c - north * s) / stepX - shift.x;
		const y = (east * s + north * c) / stepY - shift.y;
		let best = { column: 0, row: 0, distance2: Infinity };
		const nearRow = Math.round(y);
		for (const row of cell.round ? [nearRow - 1, nearRow, nearRow + 1] : [nearRow]) {
			const stagger = cell.round && row % 2 !== 0 ? 0.5 : 0;
			const column = Math.round(x - stagger);
			const distance2 = ((x - stagger - column) * stepX) ** 2 + ((y - row) * stepY) ** 2;
			if (distance2 < best.distance2) best = { column: column + stagger, row, distance2 };
		}
		const cellX = (best.column + shift.x) * stepX;
		const cellY = (best.row + shift.y) * stepY;
		const cellEast = cellX * c + cellY * s;
		const cellNorth = -cellX * s + cellY * c;
		return {
			key: best.row * KEY_STRIDE + 2 * best.column,
			centre: offset(
				middle,
				Math.hypot(cellEast, cellNorth),
				Math.atan2(cellEast, cellNorth) * DEG_PER_RAD
			)
		};
	};
}
