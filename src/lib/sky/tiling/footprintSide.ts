import type { Field, TileAxes } from './field';
import type { Vector } from '../vector';

/** Beyond this angle from the pointing the tangent plane stretches too much to decide by it. */
const PLANE_LIMIT_RAD = 1.2;

/**
 * Whether a disc of `reachRad` about a unit vector lies on one detector of a tile, on none, or has (or may
 * have) an edge in it. Never says `inside` or `outside` of a disc that an edge crosses.
 */
export function footprintSide(
	field: Field,
	{ along, east, north }: TileAxes,
	{ x, y, z }: Vector,
	reachRad: number
): 'inside' | 'outside' | 'edge' {
	const depth = along[0]! * x + along[1]! * y + along[2]! * z;
	const eastward = east[0]! * x + east[1]! * y + east[2]! * z;
	const northward = north[0]! * x + north[1]! * y + north[2]! * z;
	const angleRad = Math.atan2(Math.hypot(eastward, northward), depth);
	if (angleRad - reachRad > Math.atan(field.reach)) return 'outside';
	const farthestRad = angleRad + reachRad;
	if (farthestRad > PLANE_LIMIT_RAD) return 'edge';
	// The gnomonic projection stretches by sec² at most: the disc stays within this of its centre's image.
	const reach = reachRad / Math.cos(farthestRad) ** 2;
	let crossed = false;
	for (const part of field.detectors) {
		const e = eastward / depth;
		const n = northward / depth;
		const u = e * part.cos - n * part.sin - part.offsetX;
		const v = e * part.sin + n * part.cos - part.offsetY;
		const beyond = part.round
			? Math.hypot(u, v) - part.halfWidth
			: Math.max(Math.abs(u) - part.halfWidth, Math.abs(v) - part.halfHeight);
		if (beyond <= -reach) return 'inside';
		if (beyond < reach) crossed = true;
	}
	return crossed ? 'edge' : 'outside';
}
