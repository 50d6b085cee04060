import { RAD_PER_DEG, type Equatorial } from '../angle';
import { angleBetweenDeg, cross, dot, norm, toVector, type Vector } from '../vector';

/** A spherical polygon prepared for tests; great-circle edges, less than half the sky. */
export type SphericalPolygon = { corners: Vector[]; areaSr: number; clockwise: boolean };

/** Prepares a polygon; either sense of the vertices means the smaller side. */
export function sphericalPolygon(vertices: Equatorial[]): SphericalPolygon {
	const corners = vertices.map(toVector).filter((corner, i, all) => {
		const before = all[(i + all.length - 1) % all.length];
		return all.length === 1 || !before || angleBetweenDeg(corner, before) > 0;
	});
	if (corners.length < 3) {
		throw new RangeError(
			`vertices has ${corners.length} distinct corners; it must have at least 3`
		);
	}
	const area = signedAreaSr(corners);
	const folded =
		area > 2 * Math.PI ? area - 4 * Math.PI : area < -2 * Math.PI ? area + 4 * Math.PI : area;
	if (Math.abs(folded) < 1e-16) throw new RangeError('vertices enclose no area');
	return { corners, areaSr: Math.abs(folded), clockwise: folded < 0 };
}

/** Whether a direction lies inside, by its winding number. */
export function polygonContains(polygon: SphericalPolygon, direction: Vector): boolean {
	const { corners, clockwise } = polygon;
	let turnRad = 0;
	let from = corners[corners.length - 1];
	for (const to of corners) {
		if (from) turnRad += azimuthStepRad(direction, from, to);
		from = to;
	}
	// A turn against the polygon's own sense winds round the antipode.
	return (clockwise ? -turnRad : turnRad) > Math.PI;
}

/** Distance from a direction to the nearest point of the border, radians. */
export function borderDistanceRad(polygon: SphericalPolygon, direction: Vector): number {
	const { corners } = polygon;
	let nearest = Infinity;
	let from = corners[corners.length - 1];
	for (const to of corners) {
		if (from) nearest = Math.min(nearest, edgeDistanceRad(direction, from, to));
		from = to;
	}
	return nearest;
}

/** Sum of signed triangles by tan(E/2) = a·(b×c) / (1 + a·b + b·c + c·a) (van Oosterom & Strackee 1983). */
function signedAreaSr(corners: Vector[]): number {
	const [a] = corners;
	let sum = 0;
	if (!a) return 0;
	for (let i = 1; i + 1 < corners.length; i++) {
		const b = corners[i];
		const c = corners[i + 1];
		if (!b || !c) continue;
		// a·(b×c) from differences, to keep the digits of arcsecond triangles.
		const triple = dot(a, cross(minus(b, a), minus(c, a)));
		sum += 2 * Math.atan2(triple, 1 + dot(a, b) + dot(b, c) + dot(c, a));
	}
	return sum;
}

/** Change of direction, seen from `at`, along the edge; (−π, π], counter-clockwise positive seen from outside. */
function azimuthStepRad(at: Vector, from: Vector, to: Vector): number {
	const sine = dot(at, cross(minus(from, at), minus(to, at)));
	// The tangential parts of the differences, which keep their digits when the edge is arcseconds away.
	const u = minus(from, at);
	const v = minus(to, at);
	return Math.atan2(sine, dot(u, v) - dot(u, at) * dot(v, at));
}

function edgeDistanceRad(at: Vector, from: Vector, to: Vector): number {
	const pole = cross(from, to);
	const length = norm(pole);
	const ends = Math.min(angleBetweenDeg(at, from), angleBetweenDeg(at, to)) * RAD_PER_DEG;
	if (!(length > 0)) return ends;
	const beside = dot(cross(pole, from), at) >= 0 && dot(cross(to, pole), at) >= 0;
	return beside ? Math.asin(Math.min(1, Math.abs(dot(pole, minus(at, from))) / length)) : ends;
}

function minus(a: Vector, b: Vector): Vector {
	return { x: a.x - b.x, y: a.y - b.y, z: a.z - b.z };
}
