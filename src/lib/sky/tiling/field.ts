import { DEG_PER_RAD, RAD_PER_DEG, type Equatorial } from '../angle';
import { deproject, type TangentPoint } from '../vector';
import type { Detector } from '../visibility/telescope';

const CIRCLE_CORNERS = 48;

/** Where the telescope points and how its field is turned beyond the detectors' own rotation (north through east). */
export type Tile = { centre: Equatorial; rotationDeg: number };

/** Detectors as plain numbers on the tangent plane, for fast inside tests; lengths are tangents. */
export type Field = {
	detectors: {
		round: boolean;
		halfWidth: number;
		halfHeight: number;
		offsetX: number;
		offsetY: number;
		cos: number;
		sin: number;
	}[];
	/** Distance of the farthest corner from the pointing, tangent, and the cosine of that angle. */
	reach: number;
	reachCosine: number;
};

/** Prepares a field; throws a RangeError without detectors or with a size not above 0 and below 90°. */
export function preparedField(detectors: readonly Detector[]): Field {
	if (detectors.length === 0)
		throw new RangeError('detectors is empty; a field needs at least one');
	const parts = detectors.map((detector) => {
		const round = detector.shape === 'circle';
		const halfWidthDeg = round ? detector.radiusDeg : detector.widthDeg / 2;
		const halfHeightDeg = round ? detector.radiusDeg : detector.heightDeg / 2;
		const least = Math.min(halfWidthDeg, halfHeightDeg);
		const most = Math.max(halfWidthDeg, halfHeightDeg);
		if (!(least > 0 && most < 45)) {
			throw new RangeError(
				`half size of a detector is ${halfWidthDeg} by ${halfHeightDeg}; it must be above 0 and below 45 degrees`
			);
		}
		const rotationRad = round ? 0 : detector.rotationDeg * RAD_PER_DEG;
		return {
			round,
			halfWidth: Math.tan(halfWidthDeg * RAD_PER_DEG),
			halfHeight: Math.tan(halfHeightDeg * RAD_PER_DEG),
			offsetX: detector.offsetXDeg * RAD_PER_DEG,
			offsetY: detector.offsetYDeg * RAD_PER_DEG,
			cos: Math.cos(rotationRad),
			sin: Math.sin(rotationRad)
		};
	});
	const reach = Math.max(
		...parts.map(
			(part) =>
				Math.hypot(part.offsetX, part.offsetY) +
				(part.round ? part.halfWidth : Math.hypot(part.halfWidth, part.halfHeight))
		)
	);
	return { detectors: parts, reach, reachCosine: Math.cos(Math.atan(reach)) };
}

/** Whether a point of the tangent plane (tangents to east and north of the pointing) falls on a detector. */
export function fieldContains(field: Field, east: number, north: number): boolean {
	for (const part of field.detectors) {
		const x = east * part.cos - north * part.sin - part.offsetX;
		const y = east * part.sin + north * part.cos - part.offsetY;
		if (part.round) {
			if (x * x + y * y <= part.halfWidth * part.halfWidth) return true;
		} else if (Math.abs(x) <= part.halfWidth && Math.abs(y) <= part.halfHeight) return true;
	}
	return false;
}

/** The tangent-plane axes of a tile: unit vectors along its pointing, east and north, turned by its rotation. */
export type TileAxes = { along: number[]; east: number[]; north: number[] };

export function tileAxes({ centre, rotationDeg }: Tile): TileAxes {
	const raRad = centre.raDeg * RAD_PER_DEG;
	const decRad = centre.decDeg * RAD_PER_DEG;
	const [cosRa, sinRa] = [Math.cos(raRad), Math.sin(raRad)];
	const [cosDec, sinDec] = [Math.cos(decRad), Math.sin(decRad)];
	const east = [-sinRa, cosRa, 0];
	const north = [-sinDec * cosRa, -sinDec * sinRa, cosDec];
	const [c, s] = [Math.cos(rotationDeg * RAD_PER_DEG), Math.sin(rotationDeg * RAD_PER_DEG)];
	return {
		along: [cosDec * cosRa, cosDec * sinRa, sinDec],
		east: east.map((value, i) => c * value - s * north[i]!),
		north: east.map((value, i) => s * value + c * north[i]!)
	};
}

/** Whether an ICRS unit vector falls on a detector of the tile. */
export function tileContains(
	field: Field,
	{ along, east, north }: TileAxes,
	x: number,
	y: number,
	z: number
): boolean {
	const depth = along[0]! * x + along[1]! * y + along[2]! * z;
	if (depth < field.reachCosine) return false;
	const e = (east[0]! * x + east[1]! * y + east[2]! * z) / depth;
	const n = (north[0]! * x + north[1]! * y + north[2]! * z) / depth;
	return fieldContains(field, e, n);
}

/** Corners of each detector on the sky, for drawing and for footprints; ICRS degrees. */
export function tileOutlines(tile: Tile, detectors: readonly Detector[]): Equatorial[][] {
	const field = preparedField(detectors);
	const [c, s] = [
		Math.cos(tile.rotationDeg * RAD_PER_DEG),
		Math.sin(tile.rotationDeg * RAD_PER_DEG)
	];
	return field.detectors.map((part) => {
		const corners = part.round
			? Array.from({ length: CIRCLE_CORNERS }, (_, i) => {
					const angle = (2 * Math.PI * i) / CIRCLE_CORNERS;
					return [part.halfWidth * Math.cos(angle), part.halfWidth * Math.sin(angle)];
				})
			: [
					[-part.halfWidth, -part.halfHeight],
					[part.halfWidth, -part.halfHeight],
					[part.halfWidth, part.halfHeight],
					[-part.halfWidth, part.halfHeight]
				];
		return corners.map(([cornerX = 0, cornerY = 0]) => {
			const x = cornerX + part.offsetX;
			const y = cornerY + part.offsetY;
			const e = x * part.cos + y * part.sin;
			const n = -x * part.sin + y * part.cos;
			const point: TangentPoint = {
				eastDeg: (e * c + n * s) * DEG_PER_RAD,
				northDeg: (-e * s + n * c) * DEG_PER_RAD
			};
			return deproject(tile.centre, point);
		});
	});
}

/** Sky area of a field, square degrees, overlaps of detectors counted twice. */
export function fieldAreaDeg2(detectors: readonly Detector[]): number {
	return detectors.reduce(
		(sum, detector) =>
			sum +
			(detector.shape === 'circle'
				? Math.PI * detector.radiusDeg * detector.radiusDeg
				: detector.widthDeg * detector.heightDeg),
		0
	);
}
