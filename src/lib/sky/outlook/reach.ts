import type { Vector } from '../vector';
import { limitsAt, type LimitTest } from '../visibility/limitsAt';
import { targetAltitudeDeg, type SkyTarget } from '../visibility/siteSky';
import type { TelescopeNights } from '../visibility/targetWindows';
import type { Window } from '../visibility/telescope';

const STEP_MS = 600_000;
const EDGE_MS = 1000;

/** The region's points as apparent directions of date, with their ICRS declination and probability. */
export type DatedPoints = {
	directions: Vector[];
	centre: SkyTarget;
	/** Distance of the farthest point from the centre, degrees. */
	radiusDeg: number;
	decDeg: readonly number[];
	probability: readonly number[];
};

/**
 * Share of the region's probability that is inside all limits at some time after `fromMs`, 0 to 1. Looked at
 * every 10 minutes and at both ends of each night, so a point that is up for less than that may be missed.
 */
export function reach(
	telescope: TelescopeNights,
	points: DatedPoints,
	fromMs: number,
	likely: Window | undefined
): number {
	const times = lookTimes(telescope, points, fromMs, likely);
	if (times.length === 0) return 0;
	const tests: LimitTest[] = [];
	let inside = 0;
	let total = 0;
	points.directions.forEach((direction, i) => {
		const probability = points.probability[i]!;
		const decDeg = points.decDeg[i]!;
		total += probability;
		for (let k = 0; k < times.length; k += 1) {
			const test = (tests[k] ??= limitsAt(telescope, times[k]!));
			if (test(direction, decDeg)) {
				inside += probability;
				// Neighbouring points are up at the same time: ask the one that succeeded first.
				if (k > 0) {
					[tests[0], tests[k]] = [test, tests[0]!];
					[times[0], times[k]] = [times[k]!, times[0]!];
				}
				return;
			}
		}
	});
	return total > 0 ? inside / total : 0;
}

/** Instants of the nights at which some point of the region may be between the altitude limits. */
function lookTimes(
	telescope: TelescopeNights,
	points: DatedPoints,
	fromMs: number,
	likely: Window | undefined
): number[] {
	const { sky, nights } = telescope;
	const { minAltDeg, maxAltDeg } = telescope.pointing.limits;
	const times: number[] = [];
	if (likely) times.push((Math.max(likely.startMs, fromMs) + likely.endMs) / 2);
	for (const night of nights) {
		const startMs = Math.max(night.startMs + EDGE_MS, fromMs);
		const endMs = night.endMs - EDGE_MS;
		if (endMs < startMs) continue;
		const steps = Math.max(1, Math.ceil((endMs - startMs) / STEP_MS));
		for (let i = 0; i <= steps; i += 1) {
			const utcMs = startMs + ((endMs - startMs) * i) / steps;
			const altDeg = targetAltitudeDeg(sky, points.centre, utcMs);
			if (altDeg < minAltDeg - points.radiusDeg) continue;
			if (maxAltDeg !== null && altDeg > maxAltDeg + points.radiusDeg) continue;
			times.push(utcMs);
		}
	}
	return times;
}
