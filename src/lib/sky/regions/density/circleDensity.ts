import { fisherOf, logFisherAt, logFisherPeak } from '../fisher';
import type { CircleShape } from '../shape';
import { SIDE_PER_SIGMA, SIGMA_MIN_RAD, type Density } from './density';

/** Fisher density of a Gaussian error circle. */
export function circleDensity(shape: CircleShape): Density {
	const { mean, kappa: exactKappa } = fisherOf(shape);
	const kappa = Math.min(exactKappa, 1 / SIGMA_MIN_RAD ** 2);
	const logPeak = logFisherPeak(kappa);
	const side = SIDE_PER_SIGMA / Math.sqrt(kappa);
	const logAt: Density['logAt'] = (direction) => logFisherAt({ mean, kappa }, direction);
	return {
		logAt,
		logIn: (cell) => logAt(cell.at),
		logBound: ({ at, reachRad }) => {
			const chord = Math.hypot(at.x - mean.x, at.y - mean.y, at.z - mean.z);
			const nearestRad = 2 * Math.asin(Math.min(1, chord / 2)) - reachRad;
			if (nearestRad <= 0) return logPeak;
			return logPeak - 2 * kappa * Math.sin(nearestRad / 2) ** 2;
		},
		logPeak,
		sideRad: () => side
	};
}
