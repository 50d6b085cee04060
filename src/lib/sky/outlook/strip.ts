import { targetAltitudeDeg, type SiteSky, type SkyTarget } from '../visibility/siteSky';
import { twilightBands } from '../visibility/twilight';
import type { Strip } from './outlook';

const MINUTE_MS = 60_000;
const STEP_MINUTES = 15;
const STRIP_HOURS = 24;
const LEAD_MINUTES = 90;

/** Where the night strips of an outlook computed at `nowMs` start: an hour and a half before the quarter hour. */
export function stripStartMs(nowMs: number): number {
	const stepMs = STEP_MINUTES * MINUTE_MS;
	return Math.floor(nowMs / stepMs) * stepMs - LEAD_MINUTES * MINUTE_MS;
}

export function stripEndMs(startMs: number): number {
	return startMs + STRIP_HOURS * 60 * MINUTE_MS;
}

/** The strip's altitudes of one target, whole degrees; bands are the site's, cut to the strip. */
export function nightStrip(
	sky: SiteSky,
	target: SkyTarget,
	bands: Strip['bands'],
	startMs: number
): Strip {
	const steps = (STRIP_HOURS * 60) / STEP_MINUTES;
	return {
		startMs,
		stepMinutes: STEP_MINUTES,
		altDeg: Array.from(
			{ length: steps + 1 },
			(_, i) =>
				// Adding 0 turns −0 into 0.
				Math.round(targetAltitudeDeg(sky, target, startMs + i * STEP_MINUTES * MINUTE_MS)) + 0
		),
		bands
	};
}

/** A site's bands between start and end of the strips; the sky's span must start with the strip. */
export function stripBands(sky: SiteSky, endMs: number): Strip['bands'] {
	return twilightBands(sky)
		.filter(({ startMs }) => startMs < endMs)
		.map(({ startMs, band }) => ({ startMs: Math.round(startMs), band }));
}
