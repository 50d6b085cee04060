/**
 * NESTED HEALPix in double precision at every order, for cells finer than the library reaches.
 * Projection and index formulas: Górski et al. 2005, ApJ 622, 759, sections 4 and 5.
 */
import { DEG_PER_RAD, type Equatorial } from '../angle';
import type { Vector } from '../vector';

/** A cell by base pixel (0 to 11) and column and row in it, north-east and north-west. */
export type FaceCell = { face: number; x: number; y: number };

/** Column and row of each base pixel: its southern corner lies at column · 45° and on ring row · nside. */
export const FACE_COLUMN = [1, 3, 5, 7, 0, 2, 4, 6, 1, 3, 5, 7];
export const FACE_ROW = [2, 2, 2, 2, 3, 3, 3, 3, 4, 4, 4, 4];
const TWO_16 = 0x10000;
const TWO_32 = 0x100000000;

/** The cell of side 1/nside that holds a position; nside up to 2^29. */
export function locate(nside: number, position: Equatorial): FaceCell {
	const z = Math.sin(position.decDeg / DEG_PER_RAD);
	const quarters = (((position.raDeg / 90) % 4) + 4) % 4;
	if (Math.abs(z) <= 2 / 3) {
		const rising = nside * (0.5 + quarters);
		const height = nside * z * 0.75;
		const jp = Math.floor(rising - height);
		const jm = Math.floor(rising + height);
		const ifp = Math.floor(jp / nside);
		const ifm = Math.floor(jm / nside);
		const face = ifp === ifm ? (ifp % 4) + 4 : ifp < ifm ? ifp % 4 : (ifm % 4) + 8;
		return { face, x: jm % nside, y: nside - (jp % nside) - 1 };
	}
	const quarter = Math.min(3, Math.floor(quarters));
	const within = quarters - quarter;
	// √(3(1 − |z|)) from the half-angle, so that it keeps its digits at the poles.
	const polar = nside * Math.sqrt(6) * Math.sin((90 - Math.abs(position.decDeg)) / 2 / DEG_PER_RAD);
	const jp = Math.min(nside - 1, Math.floor(within * polar));
	const jm = Math.min(nside - 1, Math.floor((1 - within) * polar));
	return z >= 0
		? { face: quarter, x: nside - jm - 1, y: nside - jp - 1 }
		: { face: quarter + 8, x: jp, y: jm };
}

/** Unit vector of a point in a base pixel; `u` and `v` in [0, 1] along its north-east and north-west sides. */
export function facePoint(face: number, u: number, v: number): Vector {
	const row = (FACE_ROW[face] ?? 0) - u - v;
	let scale = 1;
	let z: number;
	let sinTheta: number;
	if (row < 1 || row > 3) {
		scale = row < 1 ? row : 4 - row;
		const versine = (scale * scale) / 3;
		z = row < 1 ? 1 - versine : versine - 1;
		sinTheta = Math.sqrt(versine * (2 - versine));
	} else {
		z = ((2 - row) * 2) / 3;
		sinTheta = Math.sqrt((1 - z) * (1 + z));
	}
	const column = (FACE_COLUMN[face] ?? 0) * scale + u - v;
	const phiRad = scale < 1e-15 ? 0 : (Math.PI / 4) * (column / scale);
	return { x: sinTheta * Math.cos(phiRad), y: sinTheta * Math.sin(phiRad), z };
}

/** Index of a cell in its base pixel, exact below order 25 (2^50). */
export function interleave(x: number, y: number): number {
	const low = spread(x % TWO_16) + 2 * spread(y % TWO_16);
	if (x < TWO_16 && y < TWO_16) return low;
	return (spread(Math.floor(x / TWO_16)) + 2 * spread(Math.floor(y / TWO_16))) * TWO_32 + low;
}

/** Inverse of `interleave`. */
export function deinterleave(index: number): { x: number; y: number } {
	const low = index % TWO_32;
	const high = Math.floor(index / TWO_32);
	if (high === 0) return { x: gather(low), y: gather(low >>> 1) };
	return {
		x: gather(low) + gather(high) * TWO_16,
		y: gather(low >>> 1) + gather(high >>> 1) * TWO_16
	};
}

/** `interleave` without a bound on the order, for order 29. */
export function interleaveBig(x: number, y: number): bigint {
	const low = spread(x % TWO_16) + 2 * spread(y % TWO_16);
	const high = spread(Math.floor(x / TWO_16)) + 2 * spread(Math.floor(y / TWO_16));
	return BigInt(high) * BigInt(TWO_32) + BigInt(low);
}

function spread(value: number): number {
	let v = value & 0xffff;
	v = (v | (v << 8)) & 0x00ff00ff;
	v = (v | (v << 4)) & 0x0f0f0f0f;
	v = (v | (v << 2)) & 0x33333333;
	v = (v | (v << 1)) & 0x55555555;
	return v;
}

function gather(value: number): number {
	let v = value & 0x55555555;
	v = (v | (v >>> 1)) & 0x33333333;
	v = (v | (v >>> 2)) & 0x0f0f0f0f;
	v = (v | (v >>> 4)) & 0x00ff00ff;
	v = (v | (v >>> 8)) & 0x0000ffff;
	return v;
}
