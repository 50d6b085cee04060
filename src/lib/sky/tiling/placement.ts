import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, type Equatorial } from '../angle';
import { offset, positionAngleDeg, separationDeg } from '../vector';
import { cellOffset, type Cell } from './cell';
import type { Tile } from './field';

/** The tile that brings a cell onto a position; null where none does. */
export type Placement = (position: Equatorial) => Tile | null;

/** Offset of the cell from the pointing as angle and direction (radians) in the field's own frame. */
function offsetAngles(cell: Cell): { distanceRad: number; directionRad: number } {
	const { eastDeg, northDeg } = cellOffset(cell);
	return {
		distanceRad: Math.atan(Math.hypot(eastDeg, northDeg) * RAD_PER_DEG),
		directionRad: Math.atan2(eastDeg, northDeg)
	};
}

/**
 * The tile of rotation 0 that brings the cell's middle onto a position (1e-5 degrees at the pole, 1e-9 elsewhere).
 * Of two pointings, one on each side of the pole, the one on the position's side; null where there is none, which
 * is at most as far from the pole as the cell is from the axis. From sin δ = sin δ₀ cos ρ + cos δ₀ sin ρ cos θ for
 * the pointing's δ₀.
 */
export function northTile(position: Equatorial, cell: Cell): Tile | null {
	const { distanceRad, directionRad } = offsetAngles(cell);
	if (distanceRad === 0) return { centre: position, rotationDeg: 0 };
	const northward = Math.sin(distanceRad) * Math.cos(directionRad);
	const eastward = Math.sin(distanceRad) * Math.sin(directionRad);
	const depth = Math.cos(distanceRad);
	const sine = Math.sin(position.decDeg * RAD_PER_DEG) / Math.hypot(depth, northward);
	if (Math.abs(sine) > 1) return null;
	const phase = Math.atan2(northward, depth);
	const decRad = [Math.asin(sine) - phase, Math.PI - Math.asin(sine) - phase]
		.map((angle) => (angle > Math.PI ? angle - 2 * Math.PI : angle))
		.find((angle) => Math.abs(angle) <= Math.PI / 2);
	if (decRad === undefined) return null;
	const inMeridian = depth * Math.cos(decRad) - northward * Math.sin(decRad);
	const turnRad = Math.atan2(eastward, inMeridian);
	return {
		centre: {
			raDeg: normaliseDeg(position.raDeg - turnRad * DEG_PER_RAD),
			decDeg: decRad * DEG_PER_RAD
		},
		rotationDeg: 0
	};
}

/**
 * The tile that brings the cell's middle onto a position and is turned to lie along a flat lattice about
 * `middle`; reaches every position, both poles included.
 */
export function latticeTile(position: Equatorial, cell: Cell, middle: Equatorial): Tile {
	const { distanceRad, directionRad } = offsetAngles(cell);
	const directionDeg = directionRad * DEG_PER_RAD;
	const upDeg = latticeUpDeg(middle, position);
	if (distanceRad === 0) return { centre: position, rotationDeg: cell.round ? 0 : upDeg };
	const centre = offset(position, distanceRad * DEG_PER_RAD, upDeg + directionDeg + 180);
	// From where the pointing is, not from where the position is: at the pole the two norths differ by any angle.
	return { centre, rotationDeg: normaliseDeg(positionAngleDeg(centre, position) - directionDeg) };
}

/** How far a tile's cell stands turned against a flat lattice about `middle` at a position, degrees in [0, 180]. */
export function turnAgainstLattice(cell: Cell, middle: Equatorial, position: Equatorial): number {
	const upDeg = latticeUpDeg(middle, position);
	const tile = northTile(position, cell);
	if (!tile) return 180;
	const { directionRad, distanceRad } = offsetAngles(cell);
	if (distanceRad === 0) return Math.abs(normaliseDeg(180 - upDeg) - 180);
	const seenDeg = positionAngleDeg(position, tile.centre) + 180 - directionRad * DEG_PER_RAD;
	return Math.abs(normaliseDeg(seenDeg - upDeg + 180) - 180);
}

/** Position angle at a position of what is north in the lattice: carried from the middle along the great circle. */
function latticeUpDeg(middle: Equatorial, position: Equatorial): number {
	if (separationDeg(middle, position) < 1e-9) {
		// The same place, but at a pole perhaps with another right ascension and so another north.
		const turnDeg = normaliseDeg(position.raDeg - middle.raDeg + 180) - 180;
		return normaliseDeg(turnDeg * Math.sin(middle.decDeg * RAD_PER_DEG));
	}
	return normaliseDeg(
		positionAngleDeg(position, middle) + 180 - positionAngleDeg(middle, position)
	);
}
