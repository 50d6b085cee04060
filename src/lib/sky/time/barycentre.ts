import { BaryState, Body, MakeTime } from 'astronomy-engine';
import type { Equatorial } from '../angle';
import { dot, toVector } from '../vector';
import { utcMsOfTai } from './leapSeconds';

/** Light takes this long for one astronomical unit (IAU 2012 Resolution B2 and the speed of light). */
const LIGHT_TIME_PER_AU_S = 149_597_870_700 / 299_792_458;

/**
 * Seconds by which the light of a distant source at `position` (ICRS) reaches the barycentre of the solar
 * system later than the Earth's centre at a UTC instant; negative when sooner, at most 8.5 minutes. The
 * Earth's position is astronomy-engine's (truncated VSOP87): within 10 ms of astropy, asserted (measured 5 ms).
 */
export function barycentreDelayS(position: Equatorial, utcMs: number): number {
	const { x, y, z } = BaryState(Body.Earth, MakeTime(new Date(utcMs)));
	return dot({ x, y, z }, toVector(position)) * LIGHT_TIME_PER_AU_S;
}

/**
 * The TAI clock reading, in milliseconds, at which light that passes the barycentre at `baryTaiMs` passes the
 * Earth's centre, for a distant source at `position` (ICRS); within 10 ms.
 */
export function geocentreTaiMs(position: Equatorial, baryTaiMs: number): number {
	let taiMs = baryTaiMs;
	// The Earth moves 1e-4 of its light time meanwhile: the third step changes less than a microsecond.
	for (let step = 0; step < 3; step++) {
		taiMs = baryTaiMs - barycentreDelayS(position, utcMsOfTai(taiMs)) * 1000;
	}
	return taiMs;
}
