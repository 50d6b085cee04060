import { RAD_PER_DEG, requireInRange, type Equatorial } from '../angle';
import { cellCorners, cellRadiusRad, cellVector, orderForSide } from '../healpix/healpix';
import { toVector, type Vector } from '../vector';
import { mocFromCells, wholeSky, type MocRanges } from './moc';

/** Cells across the radius: over-covers by about 1/24 of the radius, in a few hundred ranges. */
const CELLS_PER_RADIUS = 24;

/**
 * Cells that cover the cap of `radiusDeg` (0.05″ or more is resolved; less gets one cell of order 24) about
 * `centre`: no position of the cap is missing, and none is further out than one and a half cell sides.
 */
export function coneMoc(centre: Equatorial, radiusDeg: number): MocRanges {
	requireInRange('radiusDeg', radiusDeg, 0, 180);
	if (radiusDeg === 180) return wholeSky.map(([start, end]) => [start, end]);
	const axis = toVector(centre);
	const finest = orderForSide(Math.min(radiusDeg, 90) / CELLS_PER_RADIUS);
	const radiusRad = radiusDeg * RAD_PER_DEG;
	const rim2 = chordSquared(radiusRad);
	const covered: { order: number; pixel: number }[] = [];
	let pixels = Array.from({ length: 12 }, (_, pixel) => pixel);
	for (let order = 0; pixels.length > 0; order++) {
		const reachRad = cellRadiusRad(order);
		const next: number[] = [];
		// Squares of chords compare as angles do, to the last digit at arcseconds, and need no arc function.
		const outside2 = chordSquared(radiusRad + reachRad);
		const inside2 = radiusRad > reachRad ? chordSquared(radiusRad - reachRad) : -1;
		for (const pixel of pixels) {
			const cell = cellVector(order, pixel);
			const distance2 = distanceSquared(cell, axis);
			if (distance2 > outside2) continue;
			if (distance2 <= inside2) covered.push({ order, pixel });
			else if (order < finest) for (let child = 0; child < 4; child++) next.push(4 * pixel + child);
			else if (distance2 <= rim2 || touches(order, pixel, cell, distance2, radiusRad)) {
				covered.push({ order, pixel });
			}
		}
		pixels = next;
	}
	return mocFromCells(covered);
}

/** Whether a cell whose centre lies outside the cap reaches into it, by its own corners. */
function touches(
	order: number,
	pixel: number,
	centre: Vector,
	distance2: number,
	radiusRad: number
): boolean {
	let reach2 = 0;
	for (const corner of cellCorners(order, pixel)) {
		reach2 = Math.max(reach2, distanceSquared(corner, centre));
	}
	return distance2 <= chordSquared(radiusRad + 2 * Math.asin(Math.sqrt(reach2) / 2));
}

/** Square of the chord under an angle; of a half circle and more, a diameter's. */
function chordSquared(angleRad: number): number {
	return angleRad >= Math.PI ? 4 : 4 * Math.sin(angleRad / 2) ** 2;
}

function distanceSquared(a: Vector, b: Vector): number {
	const [x, y, z] = [a.x - b.x, a.y - b.y, a.z - b.z];
	return x * x + y * y + z * z;
}
