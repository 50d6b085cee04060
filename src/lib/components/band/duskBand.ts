import type { BoardTelescope, BoardTransient } from '../../domain/board';
import { sunAltitudesByLongitude, type TwilightBand } from '../../sky/ephemeris/lowSun';

/** A run of longitudes in one band, degrees east from 180° W, 0 to 360. */
export type BandRun = { fromDeg: number; toDeg: number; band: TwilightBand };

/** The Earth's longitudes at the equator, shaded by how far the Sun is down there. */
export function duskRuns(utcMs: number): BandRun[] {
	const runs: BandRun[] = [];
	const steps = 720;
	for (const [i, { band }] of sunAltitudesByLongitude(utcMs, 0, steps).entries()) {
		const last = runs.at(-1);
		const toDeg = ((i + 1) * 360) / steps;
		if (last?.band === band) last.toDeg = toDeg;
		else runs.push({ fromDeg: (i * 360) / steps, toDeg, band });
	}
	return runs;
}

export type BandTick = {
	code: string;
	name: string;
	atDeg: number;
	canObserve: boolean;
	/** It stands on a bright shade. */
	bright: boolean;
};

/** One tick per telescope; solid where a window on the transient is open at `utcMs`. */
export function bandTicks(
	telescopes: readonly BoardTelescope[],
	transient: BoardTransient | null,
	utcMs: number,
	runs: readonly BandRun[]
): BandTick[] {
	return telescopes.map(({ code, name, lonDeg }) => {
		const atDeg = (((lonDeg + 180) % 360) + 360) % 360;
		const shade = runs.find(({ fromDeg, toDeg }) => fromDeg <= atDeg && atDeg <= toDeg)?.band;
		return {
			code,
			name,
			atDeg,
			canObserve: canObserve(transient, code, utcMs),
			bright: shade === 'day' || shade === 'civil'
		};
	});
}

/** Whether one of the telescope's windows on the transient is open at the instant. */
export function canObserve(
	transient: BoardTransient | null,
	telescopeCode: string,
	utcMs: number
): boolean {
	const row = transient?.outlook?.rows.find(
		(candidate) => candidate.telescopeCode === telescopeCode
	);
	return (row?.windows ?? []).some(
		({ startAt, endAt }) => Date.parse(startAt) <= utcMs && utcMs < Date.parse(endAt)
	);
}

/** A longitude on the band's scale in words: `70° W`. */
export function longitudeText(atDeg: number): string {
	const lonDeg = Math.round(atDeg - 180);
	if (lonDeg === 0 || Math.abs(lonDeg) === 180) return `${Math.abs(lonDeg)}°`;
	return `${Math.abs(lonDeg)}° ${lonDeg < 0 ? 'W' : 'E'}`;
}

/** The band in words: where it is night, and which telescopes can observe. */
export function bandText(
	runs: readonly BandRun[],
	ticks: readonly BandTick[],
	designation: string | null
): string {
	const night = runs.filter(({ band }) => band === 'night');
	// Night across the dateline is two runs, at both ends.
	const wraps = night.length === 2 && night[0]!.fromDeg === 0 && night[1]!.toDeg === 360;
	const from = wraps ? night[1]!.fromDeg : night[0]?.fromDeg;
	const to = wraps ? night[0]!.toDeg : night.at(-1)?.toDeg;
	const where =
		from === undefined || to === undefined
			? 'Nowhere at the equator is it night.'
			: `At the equator it is night from ${longitudeText(from)} to ${longitudeText(to)}.`;
	if (ticks.length === 0 || !designation) return where;
	const names = (able: boolean) =>
		ticks
			.filter((tick) => tick.canObserve === able)
			.map(({ name }) => name)
			.join(', ') || 'none';
	return `${where} Can observe ${designation} now: ${names(true)}. Can not: ${names(false)}.`;
}
