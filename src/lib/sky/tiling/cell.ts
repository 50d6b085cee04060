import { RAD_PER_DEG, type Equatorial } from '../angle';
import type { TangentPoint } from '../vector';
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
	const boxes = detectors.map((detector) => boxAlong(detector, rotationDeg));
	const west = Math.min(...boxes.map(({ x, halfX }) => x - halfX));
	const east = Math.max(...boxes.map(({ x, halfX }) => x + halfX));
	const south = Math.min(...boxes.map(({ y, halfY }) => y - halfY));
	const north = Math.max(...boxes.map(({ y, halfY }) => y + halfY));
	return {
		round: false,
		widthDeg: east - west,
		heightDeg: north - south,
		rotationDeg,
		offsetXDeg: (east + west) / 2,
		offsetYDeg: (north + south) / 2
	};
}

/** The box around a detector along axes turned by `rotationDeg`, which may not be the detector's own. */
function boxAlong(detector: Detector, rotationDeg: number) {
	const ownDeg = detector.shape === 'circle' ? 0 : detector.rotationDeg;
	const { offsetXDeg, offsetYDeg } = detector;
	const { eastDeg, northDeg } = cellOffset({ rotationDeg: ownDeg, offsetXDeg, offsetYDeg });
	const [c, s] = [Math.cos(rotationDeg * RAD_PER_DEG), Math.sin(rotationDeg * RAD_PER_DEG)];
	const place = { x: eastDeg * c - northDeg * s, y: eastDeg * s + northDeg * c };
	if (detector.shape === 'circle') {
		return { ...place, halfX: detector.radiusDeg, halfY: detector.radiusDeg };
	}
	const turnRad = (ownDeg - rotationDeg) * RAD_PER_DEG;
	const [along, across] = [Math.abs(Math.cos(turnRad)), Math.abs(Math.sin(turnRad))];
	return {
		...place,
		halfX: (detector.widthDeg * along + detector.heightDeg * across) / 2,
		halfY: (detector.widthDeg * across + detector.heightDeg * along) / 2
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
