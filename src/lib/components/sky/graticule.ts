import type { Equatorial } from '../../sky/angle';
import type { ChartView } from './chartView';

export type GridLabel = { text: string; x: number; y: number };
export type Grid = { lines: Equatorial[][]; raLabels: GridLabel[]; decLabels: GridLabel[] };

const DEC_STEPS_ARCSEC = [
	1, 2, 5, 10, 20, 30, 60, 120, 300, 600, 1200, 1800, 3600, 7200, 18_000, 36_000, 72_000, 108_000
];
/** Seconds of time; 15 arcseconds each. */
const RA_STEPS_S = [
	0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 30, 60, 120, 300, 600, 1200, 1800, 3600, 7200, 10_800, 21_600
];
const SAMPLES = 64;
const RA_LABEL_GAP_PX = 62;
const DEC_LABEL_GAP_PX = 16;

/** Lines of right ascension and declination across the picture, with labels on its lower and left edge. */
export function chartGrid(view: ChartView): Grid {
	const field = fieldOf(view);
	if (!field) return { lines: [], raLabels: [], decLabels: [] };
	const { middle, radiusDeg } = field;
	const decStepDeg = stepFor(DEC_STEPS_ARCSEC, (radiusDeg * 3600) / 3.4) / 3600;
	const cosDec = Math.max(0.02, Math.cos((middle.decDeg * Math.PI) / 180));
	const southDeg = Math.max(-90, middle.decDeg - radiusDeg);
	const northDeg = Math.min(90, middle.decDeg + radiusDeg);
	const polar = middle.decDeg + radiusDeg >= 89.9 || middle.decDeg - radiusDeg <= -89.9;
	// Around a pole every hour circle meets in the picture: twelve of them are enough.
	const raStepDeg = polar ? 30 : stepFor(RA_STEPS_S, (radiusDeg * 240) / cosDec / 3) / 240;
	const halfRaDeg = polar
		? 180
		: Math.min(
				180,
				(Math.asin(Math.min(1, Math.sin((Math.min(radiusDeg, 90) * Math.PI) / 180) / cosDec)) *
					180) /
					Math.PI
			);

	const decs = multiples(decStepDeg, southDeg, northDeg).filter((d) => Math.abs(d) < 90);
	const ras = multiples(raStepDeg, middle.raDeg - halfRaDeg, middle.raDeg + halfRaDeg);
	return {
		lines: [
			...decs.map((decDeg) =>
				evenly(middle.raDeg - halfRaDeg, middle.raDeg + halfRaDeg).map((raDeg) => ({
					raDeg,
					decDeg
				}))
			),
			...ras.map((raDeg) => evenly(southDeg, northDeg).map((decDeg) => ({ raDeg, decDeg })))
		],
		raLabels: edgeLabels(view, 'lower', ras, (at) => at.raDeg, 360, RA_LABEL_GAP_PX).map(
			({ value, along }) => ({ text: raText(value, raStepDeg), x: along, y: view.heightPx - 5 })
		),
		decLabels: edgeLabels(view, 'left', decs, (at) => at.decDeg, null, DEC_LABEL_GAP_PX).map(
			({ value, along }) => ({ text: decText(value, decStepDeg), x: 4, y: along + 3 })
		)
	};
}

/** Middle of the picture on the sky and the distance to its farthest corner. */
function fieldOf(view: ChartView): { middle: Equatorial; radiusDeg: number } | null {
	const { widthPx, heightPx, pxPerDeg } = view;
	const middle = invert(view, widthPx / 2, heightPx / 2);
	if (!middle) return null;
	return { middle, radiusDeg: Math.min(170, Math.hypot(widthPx, heightPx) / 2 / pxPerDeg) };
}

function invert(view: ChartView, x: number, y: number): Equatorial | null {
	const at = view.projection.invert?.([x, y]);
	return at && Number.isFinite(at[0]) ? { raDeg: at[0], decDeg: at[1] } : null;
}

/** Where lines of constant `read` cross an edge of the picture: position along the edge in pixels. */
function edgeLabels(
	view: ChartView,
	edge: 'lower' | 'left',
	values: readonly number[],
	read: (at: Equatorial) => number,
	period: number | null,
	gapPx: number
): { value: number; along: number }[] {
	const length = edge === 'lower' ? view.widthPx : view.heightPx;
	const probe = (along: number) =>
		edge === 'lower' ? invert(view, along, view.heightPx - 8) : invert(view, 8, along);
	const found: { value: number; along: number }[] = [];
	let before = probe(0);
	for (let along = 1; along <= length; along++) {
		const here = probe(along);
		if (before && here) {
			for (const value of values) {
				const a = wrapped(read(before) - value, period);
				const b = wrapped(read(here) - value, period);
				if (a * b <= 0 && a !== b && Math.abs(a - b) < 90) {
					found.push({ value, along: along - 1 + a / (a - b) });
				}
			}
		}
		before = here;
	}
	// Away from the corners, where the two rows of labels and the scale bar meet.
	const [low, high] = edge === 'lower' ? [52, length - 58] : [48, length - 22];
	const kept: { value: number; along: number }[] = [];
	for (const label of found.sort((a, b) => a.along - b.along)) {
		const last = kept.at(-1);
		if (label.along < low || label.along > high) continue;
		if (!last || label.along - last.along >= gapPx) kept.push(label);
	}
	return kept;
}

function wrapped(difference: number, period: number | null): number {
	if (period === null) return difference;
	return difference - period * Math.round(difference / period);
}

function stepFor(steps: readonly number[], wanted: number): number {
	return steps.find((step) => step >= wanted) ?? steps.at(-1)!;
}

function multiples(step: number, from: number, to: number): number[] {
	const list: number[] = [];
	for (let i = Math.ceil(from / step); i * step <= to && list.length < 60; i++) list.push(i * step);
	return list;
}

function evenly(from: number, to: number): number[] {
	return Array.from({ length: SAMPLES + 1 }, (_, i) => from + ((to - from) * i) / SAMPLES);
}

const two = (value: number) => String(value).padStart(2, '0');

/** `5h`, `5h32m`, `5h33m36s`, `5h33m36.2s`: as fine as the step needs. */
export function raText(raDeg: number, stepDeg: number): string {
	const stepS = stepDeg * 240;
	const unit = stepS >= 1 ? 1 : 10;
	const total = Math.round((((raDeg % 360) + 360) % 360) * 240 * unit) % (86_400 * unit);
	const hours = Math.floor(total / (3600 * unit));
	const minutes = Math.floor(total / (60 * unit)) % 60;
	const seconds = (total % (60 * unit)) / unit;
	if (stepS >= 3600) return `${hours}h`;
	if (stepS >= 60) return `${hours}h${two(minutes)}m`;
	return `${hours}h${two(minutes)}m${unit === 1 ? two(seconds) : seconds.toFixed(1).padStart(4, '0')}s`;
}

/** `−8°`, `−8°12′`, `−8°12′05″`. */
export function decText(decDeg: number, stepDeg: number): string {
	const total = Math.round(Math.abs(decDeg) * 3600);
	const sign = total === 0 ? '' : decDeg < 0 ? '−' : '+';
	const degrees = Math.floor(total / 3600);
	const minutes = Math.floor(total / 60) % 60;
	if (stepDeg >= 1) return `${sign}${degrees}°`;
	if (stepDeg >= 1 / 60) return `${sign}${degrees}°${two(minutes)}′`;
	return `${sign}${degrees}°${two(minutes)}′${two(total % 60)}″`;
}
