import type { LimitName } from '../../sky/visibility/telescope';
import type { BoardOutlookRow, BoardTelescope } from '../board';
import { utcMinute } from './explanation';

/** Each limit as the thing that opens or ends a window. */
const EDGES: Record<LimitName, string> = {
	sun: 'the Sun’s altitude',
	altitude: 'the least altitude',
	horizon: 'the local horizon',
	zenith: 'the zenith limit',
	hourAngle: 'the hour-angle limit',
	declination: 'the declination limit',
	moon: 'the distance to the Moon',
	sunDistance: 'the distance to the Sun',
	closure: 'a closure by the site',
	start: 'the start of the outlook',
	end: 'the end of the outlook'
};

/** A window with what opens and what ends it. */
export function windowText(window: BoardOutlookRow['windows'][number]): string {
	const { startAt, endAt, opensBy, endsBy } = window;
	return `${utcMinute(startAt)} (set by ${EDGES[opensBy]}) to ${utcMinute(endAt)} (set by ${EDGES[endsBy]})`;
}

/** All limits of a telescope in one sentence. */
export function limitsText({ limits, minAltDeg, sunDistanceDeg }: BoardTelescope): string {
	const { decMinDeg, decMaxDeg } = limits;
	const all = [
		`Sun below ${limits.sunAltMaxDeg}°`,
		`altitude from ${minAltDeg}°${limits.maxAltDeg === null ? '' : ` to ${limits.maxAltDeg}°`}`,
		limits.hasHorizon ? 'clear of its horizon mask' : null,
		limits.hourAngleMaxH === null ? null : `within ${limits.hourAngleMaxH} h of the meridian`,
		decMinDeg === null ? null : `declination from ${decMinDeg}°`,
		decMaxDeg === null ? null : `declination up to ${decMaxDeg}°`,
		`${limits.moonDistanceDeg}° from a full Moon, less by its phase`,
		`${sunDistanceDeg}° from the Sun`
	];
	return all
		.filter((item) => item !== null)
		.join('; ')
		.replaceAll('-', '−');
}

/** Which limit forbids it, its value, and how close it comes to being kept. */
export function forbiddenText(
	{ limit, missingDeg, at }: NonNullable<BoardOutlookRow['forbidden']>,
	telescope: BoardTelescope | undefined
): string {
	const value = telescope ? limitValue(limit, telescope) : null;
	const name = `Forbidden by ${EDGES[limit]}${value === null ? '' : ` (${value})`}`;
	if (missingDeg === null) return `${name}.`;
	const when = at === null ? '' : `, at ${utcMinute(at)}`;
	return `${name}. It comes within ${missingDeg.toFixed(1)}° of being allowed${when}.`;
}

function limitValue(limit: LimitName, telescope: BoardTelescope): string | null {
	const { limits } = telescope;
	const words: Partial<Record<LimitName, string | null>> = {
		sun: `the Sun must be below ${limits.sunAltMaxDeg}°`,
		altitude: `at least ${telescope.minAltDeg}°`,
		zenith: limits.maxAltDeg === null ? null : `at most ${limits.maxAltDeg}° of altitude`,
		hourAngle: limits.hourAngleMaxH === null ? null : `at most ${limits.hourAngleMaxH} h`,
		moon: `${limits.moonDistanceDeg}° from a full Moon, less by its phase`,
		sunDistance: `at least ${telescope.sunDistanceDeg}°`,
		declination: [
			limits.decMinDeg === null ? null : `from ${limits.decMinDeg}°`,
			limits.decMaxDeg === null ? null : `up to ${limits.decMaxDeg}°`
		]
			.filter((item) => item !== null)
			.join(' ')
	};
	return words[limit]?.replaceAll('-', '−') || null;
}
