import { SAFETY_NOTE } from '../../domain/vocabulary';
import type { LimitName } from '../../sky/visibility/telescope';
import type { TelescopeOutlook } from './deliveryStore';
import { elapsedInWords, utcMinute } from './plainWords';

const LIMIT_WORDS: Record<LimitName, string> = {
	sun: 'the Sun is too high there while the position is up',
	altitude: 'the position stays below the altitude limit',
	horizon: 'the position stays behind the local horizon',
	zenith: 'the position stays above the zenith limit',
	hourAngle: 'the position stays outside the mount’s hour angles',
	declination: 'the declination is outside the mount’s range',
	moon: 'the Moon is too close',
	sunDistance: 'the position is too close to the Sun to point at',
	closure: 'the site has closed the telescope',
	start: 'no window begins',
	end: 'no window begins'
};

/** What matters at a partner's own telescope, as lines of a mail; none when nothing is known. */
export function telescopeAdvice(found: TelescopeOutlook | null, now: Date): string[] {
	if (!found?.row || !found.computedAt) return [];
	const { name, row, computedAt } = found;
	const nowMs = now.getTime();
	const window = row.windows.find(({ endMs }) => endMs > nowMs);
	const asOf = `Computed ${utcMinute(computedAt)} for the next 24 h.`;
	if (!window) {
		const why = row.forbidden ? `: ${LIMIT_WORDS[row.forbidden.limit]}` : '';
		return [`At ${name}`, `Can’t be observed in this time${why}.`, asOf];
	}
	const opens =
		window.startMs <= nowMs
			? `now, until ${utcMinute(new Date(window.endMs))}`
			: `${utcMinute(new Date(window.startMs))} (in ${elapsedInWords(nowMs, window.startMs)}), until ${utcMinute(new Date(window.endMs))}`;
	return [
		`At ${name}`,
		`Opens     ${opens}`,
		...(row.atOpening
			? [
					`Altitude  ${Math.round(row.atOpening.altDeg)} deg (airmass ${row.atOpening.airmass.toFixed(2)}), azimuth ${Math.round(row.atOpening.azDeg)} deg`,
					`Moon      ${Math.round(row.atOpening.moonDistanceDeg)} deg away, ${Math.round(row.atOpening.moonIlluminated * 100)} % lit`
				]
			: []),
		`Reach     ${Math.round(row.reach * 100)} % of the position’s probability`,
		asOf,
		SAFETY_NOTE
	];
}
