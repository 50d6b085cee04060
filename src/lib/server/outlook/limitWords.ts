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
	const missing = `${closestDeg.toFixed(1)}°`;
	const short: Partial<Record<LimitName, string>> = {
		sun: `the Sun is never low enough, at best ${missing} too high${at}`,
		altitude: `never high enough, at best ${missing} too low${at}`,
		horizon: `never clear of the local horizon, at best ${missing} below it${at}`,
		moon: `too close to the Moon, at best by ${missing}${at}`,
		sunDistance: `too close to the Sun, at best by ${missing}${at}`
	};
	return short[limit] ?? phrase;
}
