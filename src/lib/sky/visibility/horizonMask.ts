import { normaliseDeg, RAD_PER_DEG } from '../angle';
import { localSiderealRad, type SiteSky, type SkyTarget } from './siteSky';
import type { HorizonPoint } from './telescope';

const FULL_TURN_RAD = 2 * Math.PI;
const STEP_MS = 600_000;

/** Lowest usable altitude at an azimuth, degrees: linear between the mask's points, around the horizon. */
export function horizonAltDeg(horizon: readonly HorizonPoint[], azDeg: number): number {
	const count = horizon.length;
	if (count === 0) return -90;
	const az = normaliseDeg(azDeg);
	let next = horizon.findIndex((point) => point.azDeg > az);
	if (next === -1) next = 0;
	const after = horizon[next]!;
	const before = horizon[(next + count - 1) % count]!;
	const widthDeg = normaliseDeg(after.azDeg - before.azDeg);
	if (widthDeg === 0) return before.altDeg;
	const share = normaliseDeg(az - before.azDeg) / widthDeg;
	return before.altDeg + share * (after.altDeg - before.altDeg);
}

/**
 * Times at which a target's path must be looked at against a mask: every 10 minutes, every passage of a
 * mask point's azimuth (in closed form) and half-way between those, so that no spike or notch is stepped over.
 */
export function knotTimesMs(
	sky: SiteSky,
	target: SkyTarget,
	horizon: readonly HorizonPoint[],
	startMs: number,
	endMs: number
): number[] {
	const times: number[] = [];
	for (const { azDeg } of horizon) addPassages(times, sky, target, azDeg, startMs, endMs);
	for (let utcMs = startMs; utcMs < endMs; utcMs += STEP_MS) times.push(utcMs);
	const sorted = Float64Array.from(times).sort();
	const knots: number[] = [];
	for (let i = 0; i < sorted.length; i += 1) {
		if (i > 0) knots.push((sorted[i - 1]! + sorted[i]!) / 2);
		knots.push(sorted[i]!);
	}
	return knots;
}

/** Adds the times between two instants at which the target crosses the vertical plane of an azimuth (either side). */
function addPassages(
	times: number[],
	sky: SiteSky,
	target: SkyTarget,
	azDeg: number,
	startMs: number,
	endMs: number
): void {
	const { sinLat, cosLat } = sky.frame;
	const azRad = azDeg * RAD_PER_DEG;
	// In the plane: sin A (sin δ cos φ − cos δ cos H sin φ) + cos A cos δ sin H = 0, as east is −cos δ sin H.
	const meridianPart = Math.sin(azRad) * sinLat;
	const sidePart = -Math.cos(azRad);
	const amplitude = Math.hypot(meridianPart, sidePart) * target.cosDec;
	const cosine = (Math.sin(azRad) * target.sinDec * cosLat) / amplitude;
	if (!(Math.abs(cosine) <= 1)) return;
	const axisRad = Math.atan2(sidePart, meridianPart);
	const startRad = localSiderealRad(sky, startMs) - target.raRad;
	const halfRad = Math.acos(cosine);
	const rate = sky.shared.span.gastRadPerMs;
	for (const hourAngleRad of [axisRad - halfRad, axisRad + halfRad]) {
		let turn = Math.ceil((startRad - hourAngleRad) / FULL_TURN_RAD);
		for (; ; turn += 1) {
			const utcMs = startMs + (turn * FULL_TURN_RAD + hourAngleRad - startRad) / rate;
			if (utcMs > endMs) break;
			times.push(utcMs);
		}
	}
}
