/**
 * Rotation between ICRS and galactic coordinates (The Hipparcos and Tycho Catalogues, ESA SP-1200, 1997,
 * volume 1, section 1.5.3, equation 1.5.11; the matrix as printed there, from memory).
 */
import type { Vector } from './vector';

/** Rows: the ICRS axes of galactic x (to the centre of the Galaxy), y and z (to its north pole). */
const GALACTIC_AXES: readonly [Vector, Vector, Vector] = [
	{ x: -0.0548755604, y: -0.8734370902, z: -0.4838350155 },
	{ x: 0.4941094279, y: -0.44482963, z: 0.7469822445 },
	{ x: -0.867666149, y: -0.1980763734, z: 0.4559837762 }
];

/** A galactic direction of an ICRS one; longitude and latitude as `raDeg` and `decDeg` of the result. 0.1 mas. */
export function toGalactic({ x, y, z }: Vector): Vector {
	const [a, b, c] = GALACTIC_AXES;
	return {
		x: a.x * x + a.y * y + a.z * z,
		y: b.x * x + b.y * y + b.z * z,
		z: c.x * x + c.y * y + c.z * z
	};
}

/** An ICRS direction of a galactic one; the inverse of `toGalactic`. */
export function fromGalactic({ x, y, z }: Vector): Vector {
	const [a, b, c] = GALACTIC_AXES;
	return {
		x: a.x * x + b.x * y + c.x * z,
		y: a.y * x + b.y * y + c.y * z,
		z: a.z * x + b.z * y + c.z * z
	};
}
