import type { PolygonShape } from '../shape';
import { borderDistanceRad, polygonContains, sphericalPolygon } from '../sphericalPolygon';
import type { Density } from './density';

/** Cells per square root of the area, along the border and inside. */
const EDGE_CELLS = 70;
const INNER_CELLS = 18;

/** Uniform density inside a spherical polygon. */
export function polygonDensity(shape: PolygonShape): Density {
	const polygon = sphericalPolygon(shape.vertices);
	const logInside = -Math.log(polygon.areaSr);
	const sizeRad = Math.sqrt(polygon.areaSr);
	const logAt: Density['logAt'] = (direction) =>
		polygonContains(polygon, direction) ? logInside : -Infinity;
	return {
		logAt,
		logIn: (cell) => logAt(cell.at),
		logBound: (cell) =>
			borderDistanceRad(polygon, cell.at) <= cell.reachRad ? logInside : logAt(cell.at),
		logPeak: logInside,
		sideRad: (cell) =>
			borderDistanceRad(polygon, cell.at) > cell.reachRad
				? sizeRad / INNER_CELLS
				: sizeRad / EDGE_CELLS
	};
}
