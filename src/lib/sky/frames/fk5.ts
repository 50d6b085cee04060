import type { Equatorial } from '../angle';
import { rotate } from '../ephemeris/instant';
import { toEquatorial, toVector } from '../vector';

/**
 * Rotation from FK5 at equinox J2000 to the Hipparcos frame, which is the ICRS: angles −19.9, −9.1 and
 * 22.9 mas about x, y and z (F. Mignard & M. Froeschlé 2000, A&A 354, 732), as printed by ERFA 2.0.0.1 `fk5hip`.
 */
const FK5_TO_ICRS = [
	0.9999999999999929, 1.1102233509835495e-7, 4.411803963527301e-8, -1.1102233084981164e-7,
	0.9999999999999892, -9.647792498531089e-8, -4.4118050326662195e-8, 9.647792009628368e-8,
	0.9999999999999943
] as const;

/**
 * The ICRS position of a position in FK5 at equinox J2000; degrees. Agrees with astropy within 1e-9°; the
 * frames' slow spin (under 0.001″ a year) is left out, as there.
 */
export function icrsOfFk5(position: Equatorial): Equatorial {
	return toEquatorial(rotate(FK5_TO_ICRS, toVector(position)));
}
