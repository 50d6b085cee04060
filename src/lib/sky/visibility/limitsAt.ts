import { DEG_PER_RAD, RAD_PER_DEG } from '../angle';
import { evaluateSeries } from '../ephemeris/chebyshev';
import { observerKm } from '../ephemeris/siteFrame';
import type { Vector } from '../vector';
import { horizonAltDeg } from './horizonMask';
import { localSiderealRad, moonAltitudeDeg } from './siteSky';
import { moonLimitDeg, type TelescopeNights } from './targetWindows';

/** Whether a direction (apparent unit vector of date; ICRS declination for that limit) is inside the limits. */
export type LimitTest = (direction: Vector, decDeg: number) => boolean;

/**
 * All limits on the target at one instant as one cheap test, for many positions; that it is dark and open
 * then is the caller's to know.
 */
export function limitsAt(telescope: TelescopeNights, utcMs: number): LimitTest {
	const { sky, moonRule } = telescope;
	const { limits } = telescope.pointing;
	const { sinLat, cosLat } = sky.frame;
	const siderealRad = localSiderealRad(sky, utcMs);
	const [cosTheta, sinTheta] = [Math.cos(siderealRad), Math.sin(siderealRad)];
	const observer = observerKm(sky.frame, siderealRad);
	const sun = seenFrom(observer, evaluateSeries(sky.shared.span.sun, utcMs));
	const sunCosine = limits.sunDistanceDeg > 0 ? Math.cos(limits.sunDistanceDeg * RAD_PER_DEG) : 2;
	const moonOn = moonRule === 'plain' || moonAltitudeDeg(sky, utcMs) > 0;
	const moon = seenFrom(observer, evaluateSeries(sky.shared.span.moon, utcMs));
	const moonCosine =
		moonOn && limits.moonDistanceDeg > 0
			? Math.cos(moonLimitDeg(telescope, utcMs) * RAD_PER_DEG)
			: 2;
	const leastSine = Math.sin(limits.minAltDeg * RAD_PER_DEG);
	const mostSine = limits.maxAltDeg === null ? 2 : Math.sin(limits.maxAltDeg * RAD_PER_DEG);
	const decMinDeg = limits.decMinDeg ?? -91;
	const decMaxDeg = limits.decMaxDeg ?? 91;
	const { horizon } = limits;
	const leastHourCosine =
		limits.hourAngleMaxH === null || limits.hourAngleMaxH >= 12
			? -2
			: Math.cos(limits.hourAngleMaxH * 15 * RAD_PER_DEG);
	return ({ x, y, z }, decDeg) => {
		const meridian = x * cosTheta + y * sinTheta;
		const up = z * sinLat + meridian * cosLat;
		if (up <= leastSine || up >= mostSine) return false;
		if (decDeg < decMinDeg || decDeg > decMaxDeg) return false;
		if (x * sun.x + y * sun.y + z * sun.z >= sunCosine) return false;
		if (x * moon.x + y * moon.y + z * moon.z >= moonCosine) return false;
		if (leastHourCosine > -2 && meridian < leastHourCosine * Math.hypot(x, y)) return false;
		if (horizon === null || horizon.length === 0) return true;
		const east = y * cosTheta - x * sinTheta;
		const north = z * cosLat - meridian * sinLat;
		const altDeg = Math.asin(Math.min(1, up)) * DEG_PER_RAD;
		return altDeg > horizonAltDeg(horizon, Math.atan2(east, north) * DEG_PER_RAD);
	};
}

/** Unit vector from the observer to a body. */
function seenFrom(observer: Vector, body: Vector): Vector {
	const x = body.x - observer.x;
	const y = body.y - observer.y;
	const z = body.z - observer.z;
	const length = Math.sqrt(x * x + y * y + z * z);
	return { x: x / length, y: y / length, z: z / length };
}
