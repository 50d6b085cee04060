import { coneMoc } from '../moc/coneMoc';
import { toEquatorial } from '../vector';
import { capRadiusDeg } from './cap';
import { areaFromKappa, radiusFromKappa, sigmaFromKappa } from './containment';
import type { Fisher } from './fisher';
import type { JointRegion } from './jointRegion';
import { fisherPoints } from './regionPoints';

/** σ reported where the density is uniform: as wide as the sphere allows. */
const UNIFORM_SIGMA_DEG = 180;

/** The region of one Fisher density; areas are exact, coverage maps cover the cap. */
export function closedRegion({ mean, kappa }: Fisher): JointRegion {
	const centre = toEquatorial(mean);
	const area90Deg2 = areaFromKappa(kappa, 0.9);
	return {
		method: 'closed',
		centre,
		sigmaDeg: Math.min(UNIFORM_SIGMA_DEG, sigmaFromKappa(kappa)),
		area50Deg2: areaFromKappa(kappa, 0.5),
		area90Deg2,
		equivalentRadiusDeg: capRadiusDeg(area90Deg2),
		moc50: coneMoc(centre, radiusFromKappa(kappa, 0.5)),
		moc90: coneMoc(centre, radiusFromKappa(kappa, 0.9)),
		points: fisherPoints(centre, kappa)
	};
}
