/** HEALPix cells, NESTED, ICRS: by the library up to its greatest order, by `deepCell` below that. */
import { ang2pix_nest, corners_nest, max_pixrad } from '@hscmap/healpix';
import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, requireInRange, type Equatorial } from '../angle';
import { toEquatorial, type Vector } from '../vector';
import { deinterleave, facePoint, interleave, interleaveBig, locate } from './deepCell';

/** The library packs indices into 32-bit integers. */
const LIBRARY_ORDER_MAX = 13;
/** Greatest order whose indices and UNIQ numbers are exact in a double. */
export const CELL_ORDER_MAX = 24;
/** Order of MOC ranges; indices are bigints. */
export const MOC_ORDER = 29;

/** Looked up in the inner loops: powers cost more than the rest of a cell's sum. */
const AREA_SR = Array.from({ length: 30 }, (_, order) => Math.PI / (3 * 4 ** order));

/** Index of the cell at `order` (0 to 24) that holds a position. */
export function pixelAt(order: number, position: Equatorial): number {
	requireOrder(order);
	const nside = 2 ** order;
	if (order <= LIBRARY_ORDER_MAX) {
		const thetaRad = (90 - position.decDeg) * RAD_PER_DEG;
		return ang2pix_nest(nside, thetaRad, normaliseDeg(position.raDeg) * RAD_PER_DEG);
	}
	const { face, x, y } = locate(nside, position);
	return face * nside * nside + interleave(x, y);
}

/** Index at order 29 of the cell that holds a position; the unit of MOC ranges. */
export function pixelAtMocOrder(position: Equatorial): bigint {
	const { face, x, y } = locate(2 ** MOC_ORDER, position);
	return (BigInt(face) << BigInt(2 * MOC_ORDER)) + interleaveBig(x, y);
}

/** Unit vector of a cell's centre; order 0 to 24. */
export function cellVector(order: number, pixel: number): Vector {
	// Not by the library: this is the inner loop of every mesh, and runs twice as fast (a test compares them).
	return cellPoint(order, pixel, 0.5, 0.5);
}

/** Unit vector of a point in a cell; `u` and `v` in [0, 1] along its north-east and north-west sides. */
export function cellPoint(order: number, pixel: number, u: number, v: number): Vector {
	const nside = 2 ** order;
	const face = Math.floor(pixel / (nside * nside));
	const { x, y } = deinterleave(pixel - face * nside * nside);
	return facePoint(face, (x + u) / nside, (y + v) / nside);
}

/** A cell's centre. */
export function cellCentre(order: number, pixel: number): Equatorial {
	requirePixel(order, pixel);
	return toEquatorial(cellVector(order, pixel));
}

/** A cell's four corners: north, west, south, east. */
export function cellCorners(order: number, pixel: number): Vector[] {
	if (order <= LIBRARY_ORDER_MAX) {
		// The library's corners start in the north and run the same way round.
		return corners_nest(2 ** order, pixel).map(([x, y, z]) => ({ x, y, z }));
	}
	return [
		cellPoint(order, pixel, 1, 1),
		cellPoint(order, pixel, 0, 1),
		cellPoint(order, pixel, 0, 0),
		cellPoint(order, pixel, 1, 0)
	];
}

/** Area of one cell, steradians. */
export function cellAreaSr(order: number): number {
	return AREA_SR[order] ?? Math.PI / (3 * 4 ** order);
}

/** Area of one cell, square degrees. */
export function cellAreaDeg2(order: number): number {
	return cellAreaSr(order) * DEG_PER_RAD * DEG_PER_RAD;
}

/** Greatest distance from centre to corner of any cell at `order`, radians. */
export function cellRadiusRad(order: number): number {
	return max_pixrad(2 ** order);
}

/** Coarsest order whose mean cell side is at most `sideDeg`, 0 to 24. */
export function orderForSide(sideDeg: number): number {
	const wholeSkySide = Math.sqrt(Math.PI / 3) * DEG_PER_RAD;
	const order = Math.ceil(Math.log2(wholeSkySide / sideDeg));
	return Math.min(CELL_ORDER_MAX, Math.max(0, order));
}

/** UNIQ number of a cell: 4·4^order + index (IVOA MOC 2.0, section 4.3.1.1). */
export function toUniq(order: number, pixel: number): number {
	requirePixel(order, pixel);
	return 4 * 4 ** order + pixel;
}

/** Order and index of a UNIQ number; orders 0 to 24. */
export function fromUniq(uniq: number): { order: number; pixel: number } {
	if (!(Number.isSafeInteger(uniq) && uniq >= 4)) {
		throw new RangeError(`uniq is ${uniq}; it must be a whole number from 4 to 2^53 − 1`);
	}
	let order = Math.floor(Math.log2(uniq / 4) / 2);
	// log2 may round up across a power of 4.
	if (4 * 4 ** order > uniq) order -= 1;
	const pixel = uniq - 4 * 4 ** order;
	requirePixel(order, pixel);
	return { order, pixel };
}

/** A cell's half-open index range at order 29. */
export function cellMocRange(order: number, pixel: number): [start: bigint, end: bigint] {
	const shift = BigInt(2 * (MOC_ORDER - order));
	return [BigInt(pixel) << shift, (BigInt(pixel) + 1n) << shift];
}

function requireOrder(order: number): void {
	if (!Number.isInteger(order)) throw new RangeError(`order is ${order}; it must be whole`);
	requireInRange('order', order, 0, CELL_ORDER_MAX);
}

function requirePixel(order: number, pixel: number): void {
	requireOrder(order);
	if (!(Number.isSafeInteger(pixel) && pixel >= 0 && pixel < 12 * 4 ** order)) {
		throw new RangeError(`pixel is ${pixel}; it must be from 0 to ${12 * 4 ** order - 1}`);
	}
}
