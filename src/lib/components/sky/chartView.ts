import { geoAzimuthalEquidistant, geoPath, type GeoPath, type GeoProjection } from 'd3-geo';
import type { Equatorial } from '../../sky/angle';

/** A projection about `centre`, east to the left and north up, and what it needs to draw. */
export type ChartView = {
	projection: GeoProjection;
	path: GeoPath;
	centre: Equatorial;
	widthPx: number;
	heightPx: number;
	pxPerDeg: number;
};

const MARGIN_SHARE = 0.08;

/**
 * Fits all points into the picture: azimuthal equidistant about `centre`, moved so that the points'
 * box is in the middle. Fields smaller than `leastDeg` across are not blown up further.
 */
export function fitChart(
	centre: Equatorial,
	points: readonly Equatorial[],
	{ widthPx, heightPx, leastDeg }: { widthPx: number; heightPx: number; leastDeg: number }
): ChartView {
	const projection = geoAzimuthalEquidistant()
		.rotate([-centre.raDeg, -centre.decDeg])
		.reflectX(true)
		.clipAngle(179)
		.scale(1)
		.translate([0, 0]);
	let [left, right, top, bottom] = [0, 0, 0, 0];
	for (const [i, point] of [centre, ...points].entries()) {
		const [x, y] = projection([point.raDeg, point.decDeg]) ?? [0, 0];
		left = i === 0 ? x : Math.min(left, x);
		right = i === 0 ? x : Math.max(right, x);
		top = i === 0 ? y : Math.min(top, y);
		bottom = i === 0 ? y : Math.max(bottom, y);
	}
	const leastRad = (leastDeg * Math.PI) / 180;
	const inner = 1 - 2 * MARGIN_SHARE;
	const scale = Math.min(
		(widthPx * inner) / Math.max(right - left, leastRad),
		(heightPx * inner) / Math.max(bottom - top, leastRad)
	);
	projection
		.scale(scale)
		.translate([
			widthPx / 2 - (scale * (left + right)) / 2,
			heightPx / 2 - (scale * (top + bottom)) / 2
		])
		.precision(0.3);
	return {
		projection,
		path: geoPath(projection).digits(2),
		centre,
		widthPx,
		heightPx,
		pxPerDeg: (scale * Math.PI) / 180
	};
}

/** SVG path of a line through points on the sky; drawn as a line, so that no winding can turn it inside out. */
export function skyPath(view: ChartView, points: readonly Equatorial[]): string {
	return (
		view.path({
			type: 'LineString',
			coordinates: points.map(({ raDeg, decDeg }) => [raDeg, decDeg])
		}) ?? ''
	);
}

/**
 * SVG path of the area inside closed rings that run counterclockwise as seen on the sky, which is d3-geo's
 * sense of inside. All of them in one polygon: their sense tells pieces from holes, to the far side of the sky.
 */
export function areaPath(view: ChartView, rings: readonly (readonly Equatorial[])[]): string {
	return (
		view.path({
			type: 'Polygon',
			coordinates: rings.map((ring) => ring.map(({ raDeg, decDeg }) => [raDeg, decDeg]))
		}) ?? ''
	);
}

const BARS_DEG = [
	60,
	30,
	20,
	10,
	5,
	2,
	1,
	30 / 60,
	20 / 60,
	10 / 60,
	5 / 60,
	2 / 60,
	1 / 60,
	30 / 3600,
	20 / 3600,
	10 / 3600,
	5 / 3600,
	2 / 3600,
	1 / 3600
];

/** A round angle whose bar is at most a quarter of the picture wide. */
export function scaleBar(view: ChartView): { angleDeg: number; lengthPx: number } {
	const longestPx = view.widthPx / 4;
	const angleDeg = BARS_DEG.find((angle) => angle * view.pxPerDeg <= longestPx) ?? 1 / 3600;
	return { angleDeg, lengthPx: angleDeg * view.pxPerDeg };
}
