import { RAD_PER_DEG, requireInRange } from '../../angle';
import { angleBetweenDeg, toVector } from '../../vector';
import type { HardCircleShape } from '../shape';
import type { CellPlace, Density } from './density';

/** Cells per radius along a hard edge, and inside it. */
const EDGE_CELLS = 40;
const INNER_CELLS = 10;

/** Uniform density inside a circle. */
export function hardCircleDensity(shape: HardCircleShape): Density {
	requireInRange('radiusDeg', shape.radiusDeg, Number.MIN_VALUE, 180);
	const centre = toVector(shape.centre);
	const radiusRad = shape.radiusDeg * RAD_PER_DEG;
	const logInside = -Math.log(4 * Math.PI * Math.sin(radiusRad / 2) ** 2);
	const distanceRad = (cell: { at: CellPlace['at'] }) =>
		angleBetweenDeg(cell.at, centre) * RAD_PER_DEG;
	const logAt: Density['logAt'] = (direction) =>
		distanceRad({ at: direction }) <= radiusRad ? logInside : -Infinity;
	return {
		logAt,
		logIn: (cell) => logAt(cell.at),
		logBound: (cell) => (distanceRad(cell) - cell.reachRad <= radiusRad ? logInside : -Infinity),
		logPeak: logInside,
		sideRad: (cell) =>
			distanceRad(cell) + cell.reachRad <= radiusRad
				? radiusRad / INNER_CELLS
				: radiusRad / EDGE_CELLS
	};
}
