/**
 * Corners of cells as exact integers, so that cells of different base pixels know the ones they share:
 * ring from the north pole and place on it (Górski et al. 2005, ApJ 622, 759, section 5), nside up to 2^24.
 */
import type { Vector } from '../vector';
import { FACE_COLUMN, FACE_ROW } from './deepCell';

/** The corner at column `x` and row `y` (0 to nside, north-east and north-west) of a base pixel. */
export function cornerKey(nside: number, face: number, x: number, y: number): number {
	const ring = (FACE_ROW[face] ?? 0) * nside - x - y;
	const quarter = Math.min(ring, nside, 4 * nside - ring);
	// At a pole all places are one.
	const around = Math.max(1, 8 * quarter);
	const place = (FACE_COLUMN[face] ?? 0) * quarter + x - y;
	return ring * 8 * nside + (((place % around) + around) % around);
}

/** Unit vector of a corner by its key. */
export function cornerPoint(nside: number, key: number): Vector {
	const ring = Math.floor(key / (8 * nside));
	const place = key - ring * 8 * nside;
	const quarter = Math.min(ring, nside, 4 * nside - ring);
	const phiRad = quarter === 0 ? 0 : (Math.PI / 4) * (place / quarter);
	let z = ((2 * nside - ring) * 2) / (3 * nside);
	let sinTheta = Math.sqrt((1 - z) * (1 + z));
	if (quarter < nside) {
		// From 1 − |z|, so that it keeps its digits at the poles.
		const versine = (quarter / nside) ** 2 / 3;
		z = ring < nside ? 1 - versine : versine - 1;
		sinTheta = Math.sqrt(versine * (2 - versine));
	}
	return { x: sinTheta * Math.cos(phiRad), y: sinTheta * Math.sin(phiRad), z };
}
