import { RAD_PER_DEG, requireInRange } from '../../angle';
import { angleBetweenDeg, toVector, type Vector } from '../../vector';
import { containmentFactor1d } from '../containment';
import type { AnnulusShape } from '../shape';
import { SIGMA_MIN_RAD, type Density } from './density';

/** A ring averages over its length, so that cells may be wider across it than in a circle. */
const RING_SIDE_PER_SIGMA = 0.7;

/** Gaussian in the distance from the ring, the same all round (timing triangulation). */
export function annulusDensity(shape: AnnulusShape): Density {
	requireInRange('radiusDeg', shape.radiusDeg, 0, 180);
	if (!(shape.halfWidthDeg > 0 && shape.halfWidthDeg <= 180)) {
		throw new RangeError(`halfWidthDeg is ${shape.halfWidthDeg}; it must be above 0, at most 180`);
	}
	const centre = toVector(shape.centre);
	const radiusRad = shape.radiusDeg * RAD_PER_DEG;
	const halfWidthRad = shape.halfWidthDeg * RAD_PER_DEG;
	const sigmaRad = Math.max(SIGMA_MIN_RAD, halfWidthRad / containmentFactor1d(shape.containment));
	const logPeak = -Math.log(ringIntegralSr(radiusRad, sigmaRad));
	const fromRingRad = (direction: Vector) =>
		Math.abs(angleBetweenDeg(direction, centre) * RAD_PER_DEG - radiusRad);
	const logOff = (distanceRad: number) => logPeak - (distanceRad / sigmaRad) ** 2 / 2;
	const logAt: Density['logAt'] = (direction) => logOff(fromRingRad(direction));
	return {
		logAt,
		logIn: (cell) => logAt(cell.at),
		logBound: ({ at, reachRad }) => logOff(Math.max(0, fromRingRad(at) - reachRad)),
		logPeak,
		sideRad: () => sigmaRad * RING_SIDE_PER_SIGMA
	};
}

/** ∫ 2π sin θ exp(−(θ − r)²/2σ²) dθ over the sphere, steradians, by Simpson's rule to 1e-9. */
function ringIntegralSr(radiusRad: number, sigmaRad: number): number {
	const low = Math.max(0, radiusRad - 9 * sigmaRad);
	const high = Math.min(Math.PI, radiusRad + 9 * sigmaRad);
	const steps = 2000;
	const width = (high - low) / steps;
	let sum = 0;
	for (let i = 0; i <= steps; i++) {
		const theta = low + i * width;
		const weight = i === 0 || i === steps ? 1 : i % 2 === 1 ? 4 : 2;
		sum += weight * Math.sin(theta) * Math.exp(-(((theta - radiusRad) / sigmaRad) ** 2) / 2);
	}
	return (2 * Math.PI * sum * width) / 3;
}
