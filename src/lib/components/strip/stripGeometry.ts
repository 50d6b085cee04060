import type { BoardWindow } from '../../domain/board';
import type { Strip, TwilightBand } from '../../sky/outlook/outlook';

/** Where along the strip an instant lies, 0 to 1; outside values are not cut. */
export function stripShare(strip: Strip, utcMs: number): number {
	return (utcMs - strip.startMs) / stripSpanMs(strip);
}

/** Length of the strip, milliseconds. */
export function stripSpanMs(strip: Strip): number {
	return Math.max(1, strip.altDeg.length - 1) * strip.stepMinutes * 60_000;
}

export type BandSpan = { from: number; to: number; band: TwilightBand };

/** The background's bands as shares of the strip. */
export function bandSpans(strip: Strip): BandSpan[] {
	return strip.bands.map(({ startMs, band }, i) => ({
		from: Math.max(0, stripShare(strip, startMs)),
		to: Math.min(1, stripShare(strip, strip.bands[i + 1]?.startMs ?? Infinity)),
		band
	}));
}

/** The target's altitude at an instant, degrees, linear between the steps; null outside the strip. */
export function altitudeAt(strip: Strip, utcMs: number): number | null {
	const position = stripShare(strip, utcMs) * (strip.altDeg.length - 1);
	if (!(position >= 0 && position <= strip.altDeg.length - 1)) return null;
	const i = Math.min(Math.floor(position), strip.altDeg.length - 2);
	const low = strip.altDeg[i];
	const high = strip.altDeg[i + 1];
	if (low === undefined || high === undefined) return low ?? null;
	return low + (high - low) * (position - i);
}

export type CurvePoint = { share: number; altDeg: number };

/** The curve between two shares, with points at both ends and at every step between. */
function curveBetween(strip: Strip, from: number, to: number): CurvePoint[] {
	const steps = strip.altDeg.length - 1;
	const points: CurvePoint[] = [];
	const push = (share: number) => {
		const altDeg = altitudeAt(strip, strip.startMs + share * stripSpanMs(strip));
		if (altDeg !== null) points.push({ share, altDeg });
	};
	push(from);
	for (let i = Math.floor(from * steps) + 1; i < to * steps; i++) {
		if (i / steps > from) push(i / steps);
	}
	push(to);
	return points;
}

/** Windows as shares of the strip, cut to it, in order; empty ones are left out. */
export function windowShares(
	strip: Strip,
	windows: readonly BoardWindow[]
): { from: number; to: number }[] {
	return windows
		.map(({ startAt, endAt }) => ({
			from: Math.max(0, stripShare(strip, Date.parse(startAt))),
			to: Math.min(1, stripShare(strip, Date.parse(endAt)))
		}))
		.filter(({ from, to }) => to > from)
		.sort((a, b) => a.from - b.from);
}

/** The curve inside each window: what is filled. */
export function usableCurves(strip: Strip, windows: readonly BoardWindow[]): CurvePoint[][] {
	return windowShares(strip, windows).map(({ from, to }) => curveBetween(strip, from, to));
}

/** A stretch of curve that lies on bright or on dark bands only, so that one colour can be seen on it. */
export type ShadedCurve = { points: CurvePoint[]; bright: boolean };

/** The curve outside the windows where the target is above the horizon: what is dotted. */
export function unusableCurves(strip: Strip, windows: readonly BoardWindow[]): ShadedCurve[] {
	const gaps: { from: number; to: number }[] = [];
	let end = 0;
	for (const { from, to } of windowShares(strip, windows)) {
		if (from > end) gaps.push({ from: end, to: from });
		end = Math.max(end, to);
	}
	if (end < 1) gaps.push({ from: end, to: 1 });
	return gaps.flatMap((gap) =>
		shades(strip).flatMap(({ from, to, bright }) => {
			const [start, end] = [Math.max(gap.from, from), Math.min(gap.to, to)];
			if (end <= start) return [];
			return aboveHorizon(curveBetween(strip, start, end)).map((points) => ({ points, bright }));
		})
	);
}

function shades(strip: Strip): { from: number; to: number; bright: boolean }[] {
	const list: { from: number; to: number; bright: boolean }[] = [];
	for (const { from, to, band } of bandSpans(strip)) {
		const bright = band === 'day' || band === 'civil';
		const last = list.at(-1);
		if (last?.bright === bright) last.to = to;
		else list.push({ from, to, bright });
	}
	return list;
}

function aboveHorizon(curve: CurvePoint[]): CurvePoint[][] {
	const pieces: CurvePoint[][] = [];
	let piece: CurvePoint[] = [];
	for (const [i, point] of curve.entries()) {
		const before = curve[i - 1];
		if (before && before.altDeg > 0 !== point.altDeg > 0) {
			const part = before.altDeg / (before.altDeg - point.altDeg);
			const crossing = { share: before.share + part * (point.share - before.share), altDeg: 0 };
			piece.push(crossing);
			if (point.altDeg <= 0) {
				pieces.push(piece);
				piece = [];
			}
		}
		if (point.altDeg > 0) piece.push(point);
	}
	if (piece.length > 1) pieces.push(piece);
	return pieces.filter(({ length }) => length > 1);
}
