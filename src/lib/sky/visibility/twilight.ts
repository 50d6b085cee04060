import type { TwilightBand } from '../ephemeris/lowSun';
import { sunAltitudeDeg, type SiteSky } from './siteSky';
import { cutWindow, wholeSpan } from './windows';

/** Sun altitudes at which the sky changes its band, degrees (geometric; sunset allows for refraction and disc). */
export const TWILIGHT_ALT_DEG = { sunset: -0.8333, civil: -6, nautical: -12, astronomical: -18 };

/** The Sun's centre crosses an altitude. */
export type SunCrossing = { utcMs: number; direction: 'up' | 'down' };

/** All crossings of a Sun altitude within the span, in order, to 0.02 s (2.5 s of astropy below 60° latitude). */
export function sunCrossings(sky: SiteSky, altDeg: number): SunCrossing[] {
	const { span, timesMs } = sky.shared;
	const above = cutWindow(
		wholeSpan(span.startMs, span.endMs)[0]!,
		(utcMs) => sunAltitudeDeg(sky, utcMs) - altDeg,
		timesMs,
		sky.sunAltDeg.map((sample) => sample - altDeg),
		'sun'
	);
	return above.flatMap(({ startMs, endMs, opensBy, endsBy }): SunCrossing[] => [
		...(opensBy === 'sun' ? [{ utcMs: startMs, direction: 'up' as const }] : []),
		...(endsBy === 'sun' ? [{ utcMs: endMs, direction: 'down' as const }] : [])
	]);
}

/** The sky's bands over the span, in order; the first starts at the span's start. */
export function twilightBands(sky: SiteSky): { startMs: number; band: TwilightBand }[] {
	const order: TwilightBand[] = ['day', 'civil', 'nautical', 'astronomical', 'night'];
	const changes = Object.values(TWILIGHT_ALT_DEG).flatMap((altDeg, i) =>
		sunCrossings(sky, altDeg).map(({ utcMs, direction }) => ({
			startMs: utcMs,
			band: order[direction === 'up' ? i : i + 1]!
		}))
	);
	const firstAltDeg = sky.sunAltDeg[0]!;
	const first = Object.values(TWILIGHT_ALT_DEG).filter((altDeg) => firstAltDeg <= altDeg).length;
	return [
		{ startMs: sky.shared.span.startMs, band: order[first]! },
		...changes.sort((a, b) => a.startMs - b.startMs)
	];
}
