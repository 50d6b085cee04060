import { RAD_PER_DEG } from '../angle';

const DARK_ZENITH_NANOLAMBERT = 79;

/** Where Moon and target stand; phase angle 0 is full Moon. All degrees. */
export type MoonGeometry = {
	phaseAngleDeg: number;
	/** Moon to target. */
	distanceDeg: number;
	targetZenithDeg: number;
	moonZenithDeg: number;
};

/** Sky brightness in nanolamberts of V magnitudes per square arcsecond (Krisciunas & Schaefer 1991, eq. 1). */
export function nanolamberts(magPerArcsec2: number): number {
	return 34.08 * Math.exp(20.7233 - 0.92104 * magPerArcsec2);
}

/** Inverse of `nanolamberts`. */
export function magPerArcsec2(brightnessNanolambert: number): number {
	return (20.7233 - Math.log(brightnessNanolambert / 34.08)) / 0.92104;
}

/** Airmass of scattering used by the moonlight model (eq. 3); 5 at the horizon. */
function scatteringAirmass(zenithDeg: number): number {
	const sine = Math.sin(zenithDeg * RAD_PER_DEG);
	return 1 / Math.sqrt(1 - 0.96 * sine * sine);
}

/** Moonlight scattered towards the target, nanolamberts; 0 when either is below the horizon. */
export function moonlightNanolambert(moon: MoonGeometry, extinctionMag: number): number {
	if (moon.moonZenithDeg >= 90 || moon.targetZenithDeg >= 90) return 0;
	const phase = Math.abs(moon.phaseAngleDeg);
	const illuminance = Math.pow(10, -0.4 * (3.84 + 0.026 * phase + 4e-9 * phase ** 4));
	const cosine = Math.cos(moon.distanceDeg * RAD_PER_DEG);
	const rayleigh = Math.pow(10, 5.36) * (1.06 + cosine * cosine);
	// Mie scattering; the inner form holds below 10° and is stopped at 0.25°, the Moon's own radius.
	const distanceDeg = Math.max(moon.distanceDeg, 0.25);
	const mie =
		distanceDeg >= 10 ? Math.pow(10, 6.15 - distanceDeg / 40) : 6.2e7 / (distanceDeg * distanceDeg);
	return (
		(rayleigh + mie) *
		illuminance *
		Math.pow(10, -0.4 * extinctionMag * scatteringAirmass(moon.moonZenithDeg)) *
		(1 - Math.pow(10, -0.4 * extinctionMag * scatteringAirmass(moon.targetZenithDeg)))
	);
}

/** Moonless sky towards a zenith distance, nanolamberts (eq. 2), from its brightness at the zenith. */
export function darkSkyNanolambert(
	targetZenithDeg: number,
	extinctionMag: number,
	zenithNanolambert = DARK_ZENITH_NANOLAMBERT
): number {
	const x = scatteringAirmass(Math.min(targetZenithDeg, 90));
	return zenithNanolambert * Math.pow(10, -0.4 * extinctionMag * (x - 1)) * x;
}

/**
 * Magnitudes by which moonlight brightens the sky at the target; 0 or above (Krisciunas & Schaefer 1991,
 * PASP 103, 1033, eq. 8, 15, 16 and 20 to 22; formula from memory, its authors claim 8 to 23 %).
 */
export function moonBrighteningMag(
	moon: MoonGeometry,
	extinctionMag: number,
	darkZenithMag: number
): number {
	const moonlight = moonlightNanolambert(moon, extinctionMag);
	if (moonlight <= 0) return 0;
	const dark = darkSkyNanolambert(moon.targetZenithDeg, extinctionMag, nanolamberts(darkZenithMag));
	return 2.5 * Math.log10((moonlight + dark) / dark);
}
