import type { Equatorial } from '../angle';
import { offset } from '../vector';
import { radiusFromKappa } from './containment';

/**
 * Probability-weighted sample of a region: `probability[i]` is the share of the whole sphere's
 * probability that point i stands for; the sum is 1.
 */
export type RegionPoints = {
	raDeg: number[];
	decDeg: number[];
	probability: number[];
};

const FISHER_POINTS = 180;
const GOLDEN_ANGLE_DEG = 180 * (3 - Math.sqrt(5));

/**
 * Equal-probability points of a Fisher density, containment 0.3 % to 99.7 %: point i stands at the radius
 * that holds (i + ½)/n, turned by the golden angle (Vogel 1979, Math. Biosci. 44, 179).
 */
export function fisherPoints(
	centre: Equatorial,
	kappa: number,
	count = FISHER_POINTS
): RegionPoints {
	const points: RegionPoints = { raDeg: [], decDeg: [], probability: [] };
	for (let i = 0; i < count; i++) {
		const distanceDeg = radiusFromKappa(kappa, (i + 0.5) / count);
		const { raDeg, decDeg } = offset(centre, distanceDeg, (i * GOLDEN_ANGLE_DEG) % 360);
		points.raDeg.push(raDeg);
		points.decDeg.push(decDeg);
		points.probability.push(1 / count);
	}
	return points;
}

/** Several samples as one, each with its weight; the weights' sum is the sum of the result. */
export function mixPoints(samples: { points: RegionPoints; weight: number }[]): RegionPoints {
	return {
		raDeg: samples.flatMap(({ points }) => points.raDeg),
		decDeg: samples.flatMap(({ points }) => points.decDeg),
		probability: samples.flatMap(({ points, weight }) => points.probability.map((p) => p * weight))
	};
}

/** A circle to draw: `count` positions around `centre` at `radiusDeg`, from north through east, not closed. */
export function regionOutlinePoints(
	centre: Equatorial,
	radiusDeg: number,
	count = 72
): Equatorial[] {
	return Array.from({ length: count }, (_, i) => offset(centre, radiusDeg, (i * 360) / count));
}
