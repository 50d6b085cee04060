import {
	DEG_PER_RAD,
	normaliseDeg,
	RAD_PER_DEG,
	type Equatorial,
	type Horizontal,
	type Site
} from '../angle';
import { evaluateSeries } from '../ephemeris/chebyshev';
import { siteFrame, toHorizontal, type SiteFrame } from '../ephemeris/siteFrame';
import { skySpan, targetPlace, type SkySpan, type TargetPlace } from '../ephemeris/skySpan';
import { illuminatedFraction, moonPhaseAngleDeg } from '../ephemeris/sunMoon';
import type { Vector } from '../vector';

const STEP_MS = 1_200_000;
/** Most that the Moon's place can differ between a site and the Earth's centre, and move within half an hour. */
const MOON_ALLOWANCE_DEG = 1.03 + 0.35;

/** A span with Sun and Moon sampled every 20 minutes, shared by all sites, telescopes and positions. */
export type SharedSky = {
	span: SkySpan;
	/** From start to end of the span, both included, at most 20 minutes apart. */
	timesMs: Float64Array;
	/** Geocentric, kilometres, of date. */
	sun: Vector[];
	moon: Vector[];
};

export function sharedSky(startMs: number, endMs: number): SharedSky {
	const span = skySpan(startMs, endMs);
	const steps = Math.max(2, Math.ceil((endMs - startMs) / STEP_MS));
	const timesMs = Float64Array.from(
		{ length: steps + 1 },
		(_, i) => startMs + ((endMs - startMs) * i) / steps
	);
	return {
		span,
		timesMs,
		sun: Array.from(timesMs, (utcMs) => evaluateSeries(span.sun, utcMs)),
		moon: Array.from(timesMs, (utcMs) => evaluateSeries(span.moon, utcMs))
	};
}

/** A position prepared for a span, with lower bounds of its distance to Sun and Moon for quick answers. */
export type SkyTarget = TargetPlace & { leastSunDeg: number; leastMoonDeg: number };

/** Prepares a position once for all sites. */
export function skyTarget(position: Equatorial, sky: SharedSky): SkyTarget {
	const place = targetPlace(position, sky.span);
	return {
		...place,
		leastSunDeg: leastDistanceDeg(place.direction, sky.sun) - 0.05,
		leastMoonDeg: leastDistanceDeg(place.direction, sky.moon) - MOON_ALLOWANCE_DEG
	};
}

/** Least of every third sample (an hour), geocentric. */
function leastDistanceDeg({ x, y, z }: Vector, bodies: Vector[]): number {
	let largest = -1;
	for (let i = 0; i < bodies.length + 2; i += 3) {
		const body = bodies[Math.min(i, bodies.length - 1)]!;
		const cosine =
			(x * body.x + y * body.y + z * body.z) /
			Math.sqrt(body.x * body.x + body.y * body.y + body.z * body.z);
		if (cosine > largest) largest = cosine;
	}
	return Math.acos(Math.min(1, largest)) * DEG_PER_RAD;
}

/** The sky over one site: Sun and Moon altitude at the shared times, topocentric, degrees, no refraction. */
export type SiteSky = {
	shared: SharedSky;
	frame: SiteFrame;
	/** Local apparent sidereal time at the span's start, radians. */
	siderealStartRad: number;
	sunAltDeg: Float64Array;
	moonAltDeg: Float64Array;
};

export function siteSky(site: Site, shared: SharedSky): SiteSky {
	const frame = siteFrame(site);
	const sky: SiteSky = {
		shared,
		frame,
		siderealStartRad: shared.span.gastStartRad + frame.lonRad,
		sunAltDeg: new Float64Array(shared.timesMs.length),
		moonAltDeg: new Float64Array(shared.timesMs.length)
	};
	for (let i = 0; i < shared.timesMs.length; i += 1) {
		const siderealRad = localSiderealRad(sky, shared.timesMs[i]!);
		sky.sunAltDeg[i] = bodyAltitudeDeg(shared.sun[i]!, frame, siderealRad);
		sky.moonAltDeg[i] = bodyAltitudeDeg(shared.moon[i]!, frame, siderealRad);
	}
	return sky;
}

/** Local apparent sidereal time, radians, not folded. */
export function localSiderealRad(sky: SiteSky, utcMs: number): number {
	const { span } = sky.shared;
	return sky.siderealStartRad + (utcMs - span.startMs) * span.gastRadPerMs;
}

export function sunAltitudeDeg(sky: SiteSky, utcMs: number): number {
	const sun = evaluateSeries(sky.shared.span.sun, utcMs);
	return bodyAltitudeDeg(sun, sky.frame, localSiderealRad(sky, utcMs));
}

export function moonAltitudeDeg(sky: SiteSky, utcMs: number): number {
	const moon = evaluateSeries(sky.shared.span.moon, utcMs);
	return bodyAltitudeDeg(moon, sky.frame, localSiderealRad(sky, utcMs));
}

/** Altitude and azimuth of a target, degrees, no refraction. */
export function targetHorizontal(sky: SiteSky, target: TargetPlace, utcMs: number): Horizontal {
	return toHorizontal(target.direction, sky.frame, localSiderealRad(sky, utcMs));
}

export function targetAltitudeDeg(sky: SiteSky, target: TargetPlace, utcMs: number): number {
	const { frame } = sky;
	const sine =
		frame.sinLat * target.sinDec +
		frame.cosLat * target.cosDec * Math.cos(localSiderealRad(sky, utcMs) - target.raRad);
	return Math.asin(Math.max(-1, Math.min(1, sine))) * DEG_PER_RAD;
}

/** Hour angle of a target, degrees in [−180, 180), west positive. */
export function hourAngleDeg(sky: SiteSky, target: TargetPlace, utcMs: number): number {
	const angleDeg = (localSiderealRad(sky, utcMs) - target.raRad) * DEG_PER_RAD;
	return normaliseDeg(angleDeg + 180) - 180;
}

/** Angle from target to Moon as seen from the site, degrees. */
export function moonDistanceDeg(sky: SiteSky, target: TargetPlace, utcMs: number): number {
	const moon = evaluateSeries(sky.shared.span.moon, utcMs);
	return bodyDistanceDeg(moon, sky.frame, localSiderealRad(sky, utcMs), target.direction);
}

/** Angle from target to Sun as seen from the site, degrees. */
export function sunDistanceDeg(sky: SiteSky, target: TargetPlace, utcMs: number): number {
	const sun = evaluateSeries(sky.shared.span.sun, utcMs);
	return bodyDistanceDeg(sun, sky.frame, localSiderealRad(sky, utcMs), target.direction);
}

/** Phase angle (0 full) and illuminated fraction of the Moon. */
export function moonPhase(sky: SharedSky, utcMs: number): { angleDeg: number; fraction: number } {
	const angleDeg = moonPhaseAngleDeg(
		evaluateSeries(sky.span.sun, utcMs),
		evaluateSeries(sky.span.moon, utcMs)
	);
	return { angleDeg, fraction: illuminatedFraction(angleDeg) };
}

function bodyAltitudeDeg(body: Vector, frame: SiteFrame, siderealRad: number): number {
	const cosTheta = Math.cos(siderealRad);
	const sinTheta = Math.sin(siderealRad);
	const x = body.x - frame.axisKm * cosTheta;
	const y = body.y - frame.axisKm * sinTheta;
	const z = body.z - frame.equatorKm;
	const up = frame.cosLat * (x * cosTheta + y * sinTheta) + frame.sinLat * z;
	return Math.asin(up / Math.sqrt(x * x + y * y + z * z)) / RAD_PER_DEG;
}

function bodyDistanceDeg(
	body: Vector,
	frame: SiteFrame,
	siderealRad: number,
	direction: Vector
): number {
	const x = body.x - frame.axisKm * Math.cos(siderealRad);
	const y = body.y - frame.axisKm * Math.sin(siderealRad);
	const z = body.z - frame.equatorKm;
	const cosine =
		(x * direction.x + y * direction.y + z * direction.z) / Math.sqrt(x * x + y * y + z * z);
	return Math.acos(Math.max(-1, Math.min(1, cosine))) * DEG_PER_RAD;
}
