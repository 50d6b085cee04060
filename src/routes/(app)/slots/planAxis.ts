import { lowSunAltitudeDeg, twilightBand, type TwilightBand } from '$lib/sky/ephemeris/lowSun';

const HOUR_MS = 3_600_000;
const STEP_MS = 10 * 60_000;

/** The plan's time axis: from six hours back to a day ahead, on whole hours. */
export type PlanAxis = { startMs: number; endMs: number };

export function planAxis(nowMs: number): PlanAxis {
	const hourMs = Math.floor(nowMs / HOUR_MS) * HOUR_MS;
	return { startMs: hourMs - 6 * HOUR_MS, endMs: hourMs + 24 * HOUR_MS };
}

/** Where an instant lies on the axis, 0 to 1; outside values are not cut. */
export function axisShare({ startMs, endMs }: PlanAxis, utcMs: number): number {
	return (utcMs - startMs) / (endMs - startMs);
}

export type AxisBand = { from: number; to: number; band: TwilightBand };

/** The sky over a site along the axis, from the low-precision Sun; steps of ten minutes. */
export function axisBands(axis: PlanAxis, place: { latDeg: number; lonDeg: number }): AxisBand[] {
	const bands: AxisBand[] = [];
	for (let atMs = axis.startMs; atMs < axis.endMs; atMs += STEP_MS) {
		const band = twilightBand(lowSunAltitudeDeg(atMs + STEP_MS / 2, place));
		const to = axisShare(axis, atMs + STEP_MS);
		const last = bands.at(-1);
		if (last?.band === band) last.to = to;
		else bands.push({ from: axisShare(axis, atMs), to, band });
	}
	return bands;
}
