import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, type Equatorial } from './angle';

/** A direction in the ICRS frame: x to RA 0 on the equator, y to RA 90°, z to the north pole. */
export type Vector = { x: number; y: number; z: number };

/** The unit vector of a position; degrees in. */
export function toVector(position: Equatorial): Vector {
	const raRad = position.raDeg * RAD_PER_DEG;
	const decRad = position.decDeg * RAD_PER_DEG;
	const cosDec = Math.cos(decRad);
	return { x: cosDec * Math.cos(raRad), y: cosDec * Math.sin(raRad), z: Math.sin(decRad) };
}

/** The position of a vector of any length above 0; `raDeg` in [0, 360), 0 at the poles. */
export function toEquatorial(vector: Vector): Equatorial {
	const { x, y, z } = vector;
	return {
		raDeg: x === 0 && y === 0 ? 0 : normaliseDeg(Math.atan2(y, x) * DEG_PER_RAD),
		decDeg: Math.atan2(z, Math.hypot(x, y)) * DEG_PER_RAD
	};
}

/** Scalar product. */
export function dot(a: Vector, b: Vector): number {
	return a.x * b.x + a.y * b.y + a.z * b.z;
}

/** Vector product. */
export function cross(a: Vector, b: Vector): Vector {
	return { x: a.y * b.z - a.z * b.y, y: a.z * b.x - a.x * b.z, z: a.x * b.y - a.y * b.x };
}

/** Length of a vector. */
export function norm(a: Vector): number {
	return Math.hypot(a.x, a.y, a.z);
}

/** The vector scaled to length 1; throws a RangeError for the null vector. */
export function normalise(a: Vector): Vector {
	const length = norm(a);
	if (!(length > 0)) throw new RangeError('vector has length 0; a direction needs length above 0');
	return { x: a.x / length, y: a.y / length, z: a.z / length };
}

/** Angle between two vectors, degrees in [0, 180]; exact at small and antipodal angles (atan2 form). */
export function angleBetweenDeg(a: Vector, b: Vector): number {
	// |a − b| and |a + b| keep the digits that a · b loses near 0° and 180° (Kahan's half-angle form).
	const difference = Math.hypot(a.x - b.x, a.y - b.y, a.z - b.z);
	const sum = Math.hypot(a.x + b.x, a.y + b.y, a.z + b.z);
	return 2 * Math.atan2(difference, sum) * DEG_PER_RAD;
}

/**
 * Angular separation of two positions, degrees in [0, 180], good to 1e-9 relative at arcseconds and
 * near 180° (Vincenty's formula on the sphere; T. Vincenty 1975, Survey Review 23, 88).
 */
export function separationDeg(a: Equatorial, b: Equatorial): number {
	const { east, north, along } = tangentParts(a, b);
	return Math.atan2(Math.hypot(east, north), along) * DEG_PER_RAD;
}

/** Position angle of `to` seen from `from`, north through east, degrees in [0, 360); 0 where they coincide. */
export function positionAngleDeg(from: Equatorial, to: Equatorial): number {
	const { east, north } = tangentParts(from, to);
	return normaliseDeg(Math.atan2(east, north) * DEG_PER_RAD);
}

/** The position at `distanceDeg` from `centre` in direction `positionAngleDeg` (north through east). */
export function offset(
	centre: Equatorial,
	distanceDeg: number,
	positionAngleDeg: number
): Equatorial {
	const distanceRad = distanceDeg * RAD_PER_DEG;
	const angleRad = positionAngleDeg * RAD_PER_DEG;
	const decRad = centre.decDeg * RAD_PER_DEG;
	const sinDistance = Math.sin(distanceRad);
	const cosDistance = Math.cos(distanceRad);
	const east = sinDistance * Math.sin(angleRad);
	const north = sinDistance * Math.cos(angleRad);
	// In the meridian frame of the centre: p along its RA in the equator, q to the east, z to the pole.
	const p = cosDistance * Math.cos(decRad) - north * Math.sin(decRad);
	const z = cosDistance * Math.sin(decRad) + north * Math.cos(decRad);
	return {
		raDeg: normaliseDeg(centre.raDeg + Math.atan2(east, p) * DEG_PER_RAD),
		decDeg: Math.atan2(z, Math.hypot(p, east)) * DEG_PER_RAD
	};
}

/** A point on the tangent plane, degrees (tangent of the angle in units of a degree), east and north. */
export type TangentPoint = { eastDeg: number; northDeg: number };

/** Gnomonic projection about `centre`; null for positions 90° away or more. */
export function project(centre: Equatorial, position: Equatorial): TangentPoint | null {
	const { east, north, along } = tangentParts(centre, position);
	if (along <= 0) return null;
	return { eastDeg: (east / along) * DEG_PER_RAD, northDeg: (north / along) * DEG_PER_RAD };
}

/** Inverse of `project`. */
export function deproject(centre: Equatorial, point: TangentPoint): Equatorial {
	const radius = Math.hypot(point.eastDeg, point.northDeg);
	const distanceDeg = Math.atan(radius * RAD_PER_DEG) * DEG_PER_RAD;
	return offset(centre, distanceDeg, Math.atan2(point.eastDeg, point.northDeg) * DEG_PER_RAD);
}

/** Components of `b` along east, north and the direction of `a` itself, all for unit vectors. */
function tangentParts(
	a: Equatorial,
	b: Equatorial
): { east: number; north: number; along: number } {
	const deltaRad = reducedDifferenceDeg(b.raDeg, a.raDeg) * RAD_PER_DEG;
	const aRad = a.decDeg * RAD_PER_DEG;
	const bRad = b.decDeg * RAD_PER_DEG;
	const cosB = Math.cos(bRad);
	const halfSin = Math.sin(deltaRad / 2);
	// cos a sin b − sin a cos b cos Δ = sin(b − a) + 2 sin a cos b sin²(Δ/2): no cancellation at arcseconds.
	return {
		east: cosB * Math.sin(deltaRad),
		north:
			Math.sin((b.decDeg - a.decDeg) * RAD_PER_DEG) + 2 * Math.sin(aRad) * cosB * halfSin * halfSin,
		along:
			Math.cos((b.decDeg - a.decDeg) * RAD_PER_DEG) - 2 * Math.cos(aRad) * cosB * halfSin * halfSin
	};
}

function reducedDifferenceDeg(a: number, b: number): number {
	const difference = (a - b) % 360;
	if (difference > 180) return difference - 360;
	return difference < -180 ? difference + 360 : difference;
}
