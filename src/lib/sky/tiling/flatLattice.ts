import { DEG_PER_RAD, RAD_PER_DEG, type Equatorial } from '../angle';
import { offset } from '../vector';
import { cellKey, cellOfKey, type Cell, type Lattice } from './cell';

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
	return {
		keyOf: (_, { eastDeg, northDeg }) => {
			const x = (eastDeg * c - northDeg * s) / stepX - shift.x;
			const y = (eastDeg * s + northDeg * c) / stepY - shift.y;
			const nearRow = Math.round(y);
			if (!cell.round) return cellKey(nearRow, 2 * Math.round(x));
			let [bestRow, bestColumn, least] = [0, 0, Infinity];
			for (let row = nearRow - 1; row <= nearRow + 1; row += 1) {
				// Every other row is moved by half a step; columns count half steps.
				const stagger = row % 2 === 0 ? 0 : 1;
				const column = 2 * Math.round(x - stagger / 2) + stagger;
				const dx = (x - column / 2) * stepX;
				const dy = (y - row) * stepY;
				const distance2 = dx * dx + dy * dy;
				if (distance2 < least) [bestRow, bestColumn, least] = [row, column, distance2];
			}
			return cellKey(bestRow, bestColumn);
		},
		centreOf: (key) => {
			const { row, column } = cellOfKey(key);
			const x = (column / 2 + shift.x) * stepX;
			const y = (row + shift.y) * stepY;
			const east = x * c + y * s;
			const north = y * c - x * s;
			return offset(middle, Math.hypot(east, north), Math.atan2(east, north) * DEG_PER_RAD);
		}
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
