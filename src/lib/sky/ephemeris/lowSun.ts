import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, requireInRange } from '../angle';

const J2000_MS = Date.UTC(2000, 0, 1, 12);
const DAY_MS = 86_400_000;

/** The sky's state by the Sun's altitude: down to −0.8333° day, then −6°, −12°, −18°. */
export type TwilightBand = 'day' | 'civil' | 'nautical' | 'astronomical' | 'night';

/** The band of a Sun altitude in degrees. */
export function twilightBand(sunAltDeg: number): TwilightBand {
	if (sunAltDeg > -0.8333) return 'day';
	if (sunAltDeg > -6) return 'civil';
	if (sunAltDeg > -12) return 'nautical';
	return sunAltDeg > -18 ? 'astronomical' : 'night';
}

/**
 * The Sun's apparent declination and its Greenwich hour angle, degrees, good to 0.02° between 1950 and
 * 2050; small enough for a phone page (Meeus, Astronomical Algorithms, 2nd ed., chapters 12 and 25, low accuracy; from memory).
 */
export function lowSun(utcMs: number): { decDeg: number; greenwichHourAngleDeg: number } {
	const days = (utcMs - J2000_MS) / DAY_MS;
	// Terrestrial time runs about 70 s ahead of UTC; the Sun moves 3″ in that time, which is left out.
	const centuries = days / 36_525;
	const anomalyRad = (357.52911 + 35_999.05029 * centuries) * RAD_PER_DEG;
	const centreDeg =
		(1.914602 - 0.004817 * centuries) * Math.sin(anomalyRad) +
		0.019993 * Math.sin(2 * anomalyRad) +
		0.000289 * Math.sin(3 * anomalyRad);
	const nodeRad = (125.04 - 1934.136 * centuries) * RAD_PER_DEG;
	const longitudeRad =
		(280.46646 + 36_000.76983 * centuries + centreDeg - 0.00569 - 0.00478 * Math.sin(nodeRad)) *
		RAD_PER_DEG;
	const obliquityRad =
		(23.439291 - 0.013004 * centuries + 0.00256 * Math.cos(nodeRad)) * RAD_PER_DEG;
	const raDeg =
		Math.atan2(Math.cos(obliquityRad) * Math.sin(longitudeRad), Math.cos(longitudeRad)) *
		DEG_PER_RAD;
	const siderealDeg = 280.46061837 + 360.98564736629 * days;
	return {
		decDeg: Math.asin(Math.sin(obliquityRad) * Math.sin(longitudeRad)) * DEG_PER_RAD,
		greenwichHourAngleDeg: normaliseDeg(siderealDeg - raDeg)
	};
}

/** The Sun's geocentric altitude at a place, degrees, no refraction; good to 0.02°. */
export function lowSunAltitudeDeg(
	utcMs: number,
	place: { latDeg: number; lonDeg: number }
): number {
	const sun = lowSun(utcMs);
	return altitudeDeg(sun, place.latDeg, place.lonDeg);
}

/** One column of the dusk band: its middle longitude, the Sun's altitude there and the band. */
export type DuskColumn = { lonDeg: number; sunAltDeg: number; band: TwilightBand };

/** The dusk band: the Earth's longitudes from 180° W to 180° E in `steps` equal columns at one latitude. */
export function sunAltitudesByLongitude(
	utcMs: number,
	latDeg: number,
	steps: number
): DuskColumn[] {
	requireInRange('latDeg', latDeg, -90, 90);
	requireInRange('steps', steps, 1, 100_000);
	const sun = lowSun(utcMs);
	return Array.from({ length: Math.round(steps) }, (_, i) => {
		const lonDeg = -180 + ((i + 0.5) * 360) / Math.round(steps);
		const sunAltDeg = altitudeDeg(sun, latDeg, lonDeg);
		return { lonDeg, sunAltDeg, band: twilightBand(sunAltDeg) };
	});
}

function altitudeDeg(sun: ReturnType<typeof lowSun>, latDeg: number, lonDeg: number): number {
	const hourAngleRad = (sun.greenwichHourAngleDeg + lonDeg) * RAD_PER_DEG;
	const latRad = latDeg * RAD_PER_DEG;
	const decRad = sun.decDeg * RAD_PER_DEG;
	const sine =
		Math.sin(latRad) * Math.sin(decRad) +
		Math.cos(latRad) * Math.cos(decRad) * Math.cos(hourAngleRad);
	return Math.asin(Math.max(-1, Math.min(1, sine))) * DEG_PER_RAD;
}
