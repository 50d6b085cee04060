import type { Forbidden, LimitName } from '../../sky/visibility/telescope';

/** Each limit as it stands in a sentence: "… until 06:12 UTC (the Sun comes up)". */
export const LIMIT_PHRASES: Record<LimitName, string> = {
	sun: 'the Sun is too high',
	altitude: 'the target is too low',
	horizon: 'the target is behind the local horizon',
	zenith: 'the target is too close to the zenith',
	hourAngle: 'the mount’s hour-angle limit',
	declination: 'the mount’s declination limit',
	moon: 'the Moon is too close',
	sunDistance: 'the target is too close to the Sun',
	closure: 'the site has closed the telescope',
	start: 'the start of the outlook',
	end: 'the end of the outlook'
};

/** Why a telescope can't observe at all, and how close it comes. */
export function whyNot({ limit, closestDeg, atMs }: Forbidden): string {
	const phrase = LIMIT_PHRASES[limit];
	if (closestDeg === null) return phrase;
	const at = atMs === null ? '' : ` at ${new Date(atMs).toISOString().slice(11, 16)} UTC`;
	const short: Partial<Record<LimitName, string>> = {
		sun: `the Sun is never low enough, ${closestDeg.toFixed(1)}°${at} at best`,
		altitude: `never high enough, ${closestDeg.toFixed(1)}°${at} at best`,
		horizon: `never clear of the local horizon, ${closestDeg.toFixed(1)}°${at} at best`,
		moon: `too close to the Moon, ${closestDeg.toFixed(1)}°${at} at best`,
		sunDistance: `too close to the Sun, ${closestDeg.toFixed(1)}°${at} at best`
	};
	return short[limit] ?? phrase;
}
