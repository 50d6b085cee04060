import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, type Equatorial } from '../angle';
import { deproject, offset, positionAngleDeg, separationDeg } from '../vector';
import { cellOffset, KEY_STRIDE, pointingFor, type Cell, type Lattice } from './cell';

/**
 * A flat lattice around the region's middle, kept at true distances from it: hexagonal for circles. Distances
 * across the line of sight shrink away from the middle, so circles leave no holes; neither do rectangles as long as
 * their cells are shrunk by how far they turn against the lattice (`cellTurnedBy`).
 */
export function flatLattice(
	cell: Cell,
	middle: Equatorial,
	shift: { x: number; y: number }
): Lattice {
	const c = Math.cos(cell.rotationDeg * RAD_PER_DEG);
	const s = Math.sin(cell.rotationDeg * RAD_PER_DEG);
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
		const nearRow = Math.round(y);
		let best = { column: 0, row: 0, distance2: Infinity };
		for (let row = nearRow - 1; row <= nearRow + 1; row += 1) {
			if (!cell.round && row !== nearRow) continue;
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

/** The largest cell that fits into the rectangle when that is turned by anything up to an angle (degrees). */
export function cellTurnedBy(cell: Cell, turnDeg: number): Cell {
	if (cell.round) return cell;
	const { widthDeg: w, heightDeg: h } = cell;
	let scale = 1;
	let square = Math.min(w, h);
	for (let deg = 0; deg <= 90; deg += 0.5) {
		const angleRad = Math.min(deg, turnDeg, 90) * RAD_PER_DEG;
		const c = Math.cos(angleRad);
		const s = Math.sin(angleRad);
		scale = Math.min(scale, w / (w * c + h * s), h / (w * s + h * c));
		square = Math.min(square, Math.min(w, h) / (c + s));
	}
	return square * square > scale * scale * w * h
		? { ...cell, widthDeg: square, heightDeg: square }
		: { ...cell, widthDeg: scale * w, heightDeg: scale * h };
}

/**
 * How far a field at a position stands turned against a flat lattice about `middle`, degrees: the lattice keeps
 * its direction, the field follows north at its pointing.
 */
export function turnAgainstLattice(cell: Cell, middle: Equatorial, position: Equatorial): number {
	const outDeg = positionAngleDeg(position, middle) + 180 - positionAngleDeg(middle, position);
	const pointing = pointingFor(position, cell);
	const up = deproject(pointing, cellOffset({ ...cell, offsetYDeg: cell.offsetYDeg + 0.01 }));
	const axisDeg = positionAngleDeg(position, up);
	return Math.abs(normaliseDeg(axisDeg - cell.rotationDeg - outDeg + 180) - 180);
}
