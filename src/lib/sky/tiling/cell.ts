import { RAD_PER_DEG, type Equatorial } from '../angle';
import { deproject, project, type TangentPoint } from '../vector';
import type { Detector } from '../visibility/telescope';

/**
 * A regular arrangement of fields: the key of the cell that a place falls into (`plane` is the place on the
 * equidistant plane about the lattice's middle), and the centre of a cell.
 */
export type Lattice = {
	keyOf: (position: Equatorial, plane: TangentPoint) => number;
	centreOf: (key: number) => Equatorial;
};

const KEY_STRIDE = 1 << 22;

/** One number for a row and a column, each within ±2 million. */
export function cellKey(row: number, column: number): number {
	return row * KEY_STRIDE + column + KEY_STRIDE / 2;
}

/** Inverse of `cellKey`. */
export function cellOfKey(key: number): { row: number; column: number } {
	const row = Math.floor(key / KEY_STRIDE);
	return { row, column: key - row * KEY_STRIDE - KEY_STRIDE / 2 };
}

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

/** A field's place relative to the pointing. */
type Offset = { rotationDeg: number; offsetXDeg: number; offsetYDeg: number };

/** Offset of a cell from the pointing along east and north. */
export function cellOffset({ rotationDeg, offsetXDeg, offsetYDeg }: Offset): TangentPoint {
	const c = Math.cos(rotationDeg * RAD_PER_DEG);
	const s = Math.sin(rotationDeg * RAD_PER_DEG);
	return { eastDeg: offsetXDeg * c + offsetYDeg * s, northDeg: offsetYDeg * c - offsetXDeg * s };
}

/** Where to point so that the cell lands on a position; nearest possible close to a pole. */
export function pointingFor(position: Equatorial, cell: Offset): Equatorial {
	if (cell.offsetXDeg === 0 && cell.offsetYDeg === 0) return position;
	const wanted = cellOffset(cell);
	let pointing = deproject(position, { eastDeg: -wanted.eastDeg, northDeg: -wanted.northDeg });
	for (let step = 0; step < 12; step += 1) {
		const seen = project(pointing, position);
		if (!seen) break;
		const eastDeg = seen.eastDeg - wanted.eastDeg;
		const northDeg = seen.northDeg - wanted.northDeg;
		if (Math.hypot(eastDeg, northDeg) < 1e-7) break;
		pointing = deproject(pointing, { eastDeg, northDeg });
	}
	return pointing;
}
