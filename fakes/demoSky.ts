import { Body, GeoVector } from 'astronomy-engine';
import { DEG_PER_RAD, type Equatorial } from '../src/lib/sky/angle';
import { kappaFromRadius, kappaFromSigma } from '../src/lib/sky/regions/containment';
import type { CircleShape } from '../src/lib/sky/regions/shape';
import { offset, toEquatorial } from '../src/lib/sky/vector';

/** A source of uniform draws in [0, 1). */
export type Draw = () => number;

/** Repeatable draws from a 32-bit seed (the `mulberry32` mixing function, public domain; from memory). */
export function seededDraw(seed: number): Draw {
	let state = seed >>> 0;
	return () => {
		state = (state + 0x6d2b79f5) >>> 0;
		let mixed = Math.imul(state ^ (state >>> 15), state | 1);
		mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
	};
}

/** A number drawn evenly between `low` and `high`. */
export function between(draw: Draw, low: number, high: number): number {
	return low + (high - low) * draw();
}

/** A position at most `reachDeg` from the point opposite the Sun, evenly over that cap of the sky. */
export function antisolarPosition(draw: Draw, utcMs: number, reachDeg = 60): Equatorial {
	const sun = GeoVector(Body.Sun, new Date(utcMs), true);
	const opposite = toEquatorial({ x: -sun.x, y: -sun.y, z: -sun.z });
	const cosReach = Math.cos(reachDeg / DEG_PER_RAD);
	const distanceDeg = Math.acos(1 - draw() * (1 - cosReach)) * DEG_PER_RAD;
	return offset(opposite, distanceDeg, 360 * draw());
}

/**
 * An error circle as an instrument with these errors would report a source at `truth`: its centre is
 * drawn from the Fisher density of the radius and from that of the systematic error.
 */
export function measuredCircle(
	draw: Draw,
	truth: Equatorial,
	errors: { radiusDeg: number; containment: number; systematicDeg?: number }
): CircleShape {
	let centre = scattered(draw, truth, kappaFromRadius(errors.radiusDeg, errors.containment));
	if (errors.systematicDeg) centre = scattered(draw, centre, kappaFromSigma(errors.systematicDeg));
	return { kind: 'circle', centre: rounded(centre, errors.radiusDeg), ...errors };
}

/** A draw from the Fisher density about `centre` (inverse of the cap integral; R. A. Fisher 1953). */
function scattered(draw: Draw, centre: Equatorial, kappa: number): Equatorial {
	// 1 − cos r = −ln(1 − u(1 − e^(−2κ)))/κ, and 1 − cos r = 2 sin²(r/2) keeps arcseconds.
	const versine = -Math.log1p(draw() * Math.expm1(-2 * kappa)) / kappa;
	const distanceDeg = 2 * Math.asin(Math.sqrt(Math.min(1, versine / 2))) * DEG_PER_RAD;
	return offset(centre, distanceDeg, 360 * draw());
}

/** Rounds a position to about a thousandth of its error, as packets print it. */
function rounded(position: Equatorial, radiusDeg: number): Equatorial {
	const digits = Math.min(9, Math.max(2, Math.ceil(3 - Math.log10(radiusDeg))));
	const raDeg = Number(position.raDeg.toFixed(digits));
	return { raDeg: raDeg >= 360 ? 0 : raDeg, decDeg: Number(position.decDeg.toFixed(digits)) };
}
