import { Body, GeoMoon, GeoVector, KM_PER_AU, MakeTime } from 'astronomy-engine';
import { RAD_PER_DEG, type Horizontal, type Site } from '../angle';
import { angleBetweenDeg, norm, type Vector } from '../vector';
import { apparentVector, instantAt, rotate, type Instant } from './instant';
import { observerKm, siteFrame, toHorizontal } from './siteFrame';
import type { Equatorial } from '../angle';

const LIGHT_KM_PER_MS = 299.792458;
const MOON_LIGHT_MS = 384_400 / LIGHT_KM_PER_MS;

/** Apparent geocentric Sun, kilometres, true equator and equinox of date (astronomy-engine, VSOP87 cut short). */
export function sunKm(instant: Instant): Vector {
	const vector = GeoVector(Body.Sun, MakeTime(new Date(instant.utcMs)), true);
	const { x, y, z } = rotate(instant.toDate, vector);
	return { x: x * KM_PER_AU, y: y * KM_PER_AU, z: z * KM_PER_AU };
}

/** Apparent geocentric Moon, kilometres, true equator and equinox of date; mean light time of 1.28 s taken off. */
export function moonKm(instant: Instant): Vector {
	const vector = GeoMoon(MakeTime(new Date(instant.utcMs - MOON_LIGHT_MS)));
	const { x, y, z } = rotate(instant.toDate, vector);
	return { x: x * KM_PER_AU, y: y * KM_PER_AU, z: z * KM_PER_AU };
}

/** Phase angle Sun–Moon–Earth of geocentric vectors, degrees; 0 is full. */
export function moonPhaseAngleDeg(sun: Vector, moon: Vector): number {
	const toSun = { x: sun.x - moon.x, y: sun.y - moon.y, z: sun.z - moon.z };
	return angleBetweenDeg(unit(toSun), unit({ x: -moon.x, y: -moon.y, z: -moon.z }));
}

/** Illuminated fraction of the disc from the phase angle (Meeus, Astronomical Algorithms, eq. 48.1; from memory). */
export function illuminatedFraction(phaseAngleDeg: number): number {
	return (1 + Math.cos(phaseAngleDeg * RAD_PER_DEG)) / 2;
}

/**
 * Topocentric altitude and azimuth of a target, the Sun and the Moon at one instant, no refraction.
 * Against astropy 5.2.1: target within 1″, Sun 2″, Moon 15″, illuminated fraction 0.0005.
 * For many samples use `altitudeGrid` or a `SkySpan`.
 */
export function skyAt(
	site: Site,
	utcMs: number,
	position: Equatorial
): { target: Horizontal; sun: Horizontal; moon: Horizontal; moonIlluminated: number } {
	const instant = instantAt(utcMs);
	const frame = siteFrame(site);
	const siderealRad = instant.gastRad + frame.lonRad;
	const observer = observerKm(frame, siderealRad);
	const sun = sunKm(instant);
	const moon = moonKm(instant);
	return {
		target: toHorizontal(apparentVector(position, instant), frame, siderealRad),
		sun: toHorizontal(minus(sun, observer), frame, siderealRad),
		moon: toHorizontal(minus(moon, observer), frame, siderealRad),
		moonIlluminated: illuminatedFraction(moonPhaseAngleDeg(sun, moon))
	};
}

function minus(a: Vector, b: Vector): Vector {
	return { x: a.x - b.x, y: a.y - b.y, z: a.z - b.z };
}

function unit(a: Vector): Vector {
	const length = norm(a);
	return { x: a.x / length, y: a.y / length, z: a.z / length };
}
