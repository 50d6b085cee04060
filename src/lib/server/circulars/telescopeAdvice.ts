import { SAFETY_NOTE } from '../../domain/vocabulary';
import { whyNot } from '../outlook/limitWords';
import type { TelescopeOutlook } from './deliveryStore';
import { elapsedInWords, utcMinute } from './plainWords';

/** What matters at a partner's own telescope, as lines of a mail; none when nothing is known. */
export function telescopeAdvice(found: TelescopeOutlook | null, now: Date): string[] {
	if (!found?.row || !found.computedAt) return [];
	const { name, row, computedAt } = found;
	const nowMs = now.getTime();
	const window = row.windows.find(({ endMs }) => endMs > nowMs);
	const asOf = `Computed ${utcMinute(computedAt)} for the next 24 h.`;
	if (!window) {
		const why = row.forbidden ? `: ${whyNot(row.forbidden)}` : '';
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
