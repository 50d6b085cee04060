import { airmass } from '../visibility/airmass';
import { moonBrighteningMag, type MoonGeometry } from '../visibility/moonlight';
import type { Depth } from '../visibility/telescope';

/**
 * 5-sigma limit of one exposure, magnitudes:
 * m_ref + 1.25 log₁₀(t_exp / t_ref) − k (X − 1) − 0.5 Δμ, never deeper than the floor (sky-limited photometry,
 * common practice, no source). `moon` null means that no moonlight counts; −Infinity below the horizon.
 */
export function limitMag(
	depth: Depth,
	exposureS: number,
	altDeg: number,
	moon: MoonGeometry | null
): number {
	const x = airmass(altDeg);
	if (x === null) return -Infinity;
	const brightening = moon ? moonBrighteningMag(moon, depth.extinctionMag, depth.darkSkyMag) : 0;
	const limit =
		depth.refLimitMag +
		1.25 * Math.log10(exposureS / depth.refExposureS) -
		depth.extinctionMag * (x - 1) -
		0.5 * brightening;
	return Math.min(limit, depth.floorMag);
}
