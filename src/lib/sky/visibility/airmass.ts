import { RAD_PER_DEG } from '../angle';

/**
 * Relative airmass at an altitude in degrees; null below the horizon. 1 at the zenith within 0.0004, 38 at 0°
 * (Kasten & Young 1989, Applied Optics 28, 4735; coefficients from memory, checked with the reference file).
 */
export function airmass(altDeg: number): number | null {
	if (!(altDeg >= 0)) return null;
	return 1 / (Math.sin(altDeg * RAD_PER_DEG) + 0.50572 * Math.pow(altDeg + 6.07995, -1.6364));
}
