import { RAD_PER_DEG, requireInRange, type Equatorial } from '../angle';
import { cellCorners, cellRadiusRad, cellVector, orderForSide } from '../healpix/healpix';
import { angleBetweenDeg, toVector, type Vector } from '../vector';
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
	const covered: { order: number; pixel: number }[] = [];
	let pixels = Array.from({ length: 12 }, (_, pixel) => pixel);
	for (let order = 0; pixels.length > 0; order++) {
		const reachRad = cellRadiusRad(order);
		const next: number[] = [];
		for (const pixel of pixels) {
			const cell = cellVector(order, pixel);
			const distanceRad = angleBetweenDeg(cell, axis) * RAD_PER_DEG;
			if (distanceRad > radiusRad + reachRad) continue;
			if (distanceRad + reachRad <= radiusRad) covered.push({ order, pixel });
			else if (order < finest) for (let child = 0; child < 4; child++) next.push(4 * pixel + child);
			else if (distanceRad <= radiusRad + ownReachRad(order, pixel, cell)) {
				covered.push({ order, pixel });
			}
		}
		pixels = next;
	}
	return mocFromCells(covered);
}

function ownReachRad(order: number, pixel: number, centre: Vector): number {
	const corners = cellCorners(order, pixel);
	return Math.max(...corners.map((corner) => angleBetweenDeg(corner, centre))) * RAD_PER_DEG;
}
