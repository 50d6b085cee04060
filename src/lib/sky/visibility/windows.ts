import type { LimitName, Window } from './telescope';

const EDGE_TOLERANCE_MS = 20;
const MERGE_GAP_MS = 1000;

/** The whole span as one window. */
export function wholeSpan(startMs: number, endMs: number): Window[] {
	return [{ startMs, endMs, opensBy: 'start', endsBy: 'end' }];
}

/** Times in both lists, each sorted and disjoint; an edge keeps the name of the limit that sets it. */
export function intersectWindows(a: readonly Window[], b: readonly Window[]): Window[] {
	const common: Window[] = [];
	for (let i = 0, j = 0; i < a.length && j < b.length;) {
		const first = a[i]!;
		const second = b[j]!;
		const later = second.startMs > first.startMs ? second : first;
		const earlier = second.endMs < first.endMs ? second : first;
		if (later.startMs < earlier.endMs) {
			common.push({
				startMs: later.startMs,
				endMs: earlier.endMs,
				opensBy: later.opensBy,
				endsBy: earlier.endsBy
			});
		}
		if (earlier === first) i += 1;
		else j += 1;
	}
	return common;
}

/** Times in either list; touching windows become one. */
export function uniteWindows(lists: readonly (readonly Window[])[]): Window[] {
	const sorted = lists.flat().sort((a, b) => a.startMs - b.startMs);
	return mergeWindows(sorted, 0);
}

/** The span without the `blocked` windows; edges are named `limit`. */
export function withoutWindows(
	blocked: readonly Window[],
	limit: LimitName,
	startMs: number,
	endMs: number
): Window[] {
	const open: Window[] = [];
	let fromMs = startMs;
	let opensBy: LimitName = 'start';
	for (const block of blocked) {
		if (block.startMs > fromMs) {
			open.push({ startMs: fromMs, endMs: Math.min(block.startMs, endMs), opensBy, endsBy: limit });
		}
		if (block.endMs > fromMs) {
			fromMs = block.endMs;
			opensBy = limit;
		}
	}
	if (fromMs < endMs) open.push({ startMs: fromMs, endMs, opensBy, endsBy: 'end' });
	return open.filter((window) => window.startMs < window.endMs);
}

/** Joins windows with gaps of at most 1 s, which is below what edges are good for, and drops shorter windows. */
export function tidyWindows(windows: readonly Window[]): Window[] {
	return mergeWindows(windows, MERGE_GAP_MS).filter(
		(window) => window.endMs - window.startMs >= MERGE_GAP_MS
	);
}

function mergeWindows(sorted: readonly Window[], gapMs: number): Window[] {
	const merged: Window[] = [];
	for (const window of sorted) {
		const last = merged.at(-1);
		if (last && window.startMs - last.endMs <= gapMs) {
			if (window.endMs > last.endMs) {
				last.endMs = window.endMs;
				last.endsBy = window.endsBy;
			}
		} else merged.push({ ...window });
	}
	return merged;
}

/**
 * Cuts `windows` down to where `marginDeg` is above 0. It is sampled at the `timesMs` inside each window and
 * both edges; between samples a same-sign run is searched at every extremum that a parabola puts near 0, so
 * that short dips and peaks are found. Edges are root-found to 0.02 s.
 */
export function windowsWhere(
	windows: readonly Window[],
	marginDeg: (utcMs: number) => number,
	timesMs: ArrayLike<number>,
	limit: LimitName
): Window[] {
	return windows.flatMap((window) => {
		const times = [window.startMs, ...timesBetween(timesMs, window), window.endMs];
		return cutWindow(window, marginDeg, times, times.map(marginDeg), limit);
	});
}

/** The same on samples already made; the first and last time are the window's edges. */
export function cutWindow(
	window: Window,
	marginDeg: (utcMs: number) => number,
	timesMs: ArrayLike<number>,
	margins: ArrayLike<number>,
	limit: LimitName
): Window[] {
	const { times, values } = withExtrema(marginDeg, timesMs, margins);
	const open: Window[] = [];
	let current: Window | null = values[0]! > 0 ? { ...window } : null;
	for (let i = 1; i < times.length; i += 1) {
		if (values[i]! > 0 === values[i - 1]! > 0) continue;
		const edgeMs = findRoot(marginDeg, times[i - 1]!, times[i]!, values[i - 1]!, values[i]!);
		if (current) {
			open.push({ ...current, endMs: edgeMs, endsBy: limit });
			current = null;
		} else
			current = { startMs: edgeMs, endMs: window.endMs, opensBy: limit, endsBy: window.endsBy };
	}
	if (current) open.push(current);
	return open.filter(({ startMs, endMs }) => startMs < endMs);
}

function timesBetween(timesMs: ArrayLike<number>, { startMs, endMs }: Window): number[] {
	const inside: number[] = [];
	for (let i = 0; i < timesMs.length; i += 1) {
		const utcMs = timesMs[i]!;
		if (utcMs > startMs && utcMs < endMs) inside.push(utcMs);
	}
	return inside;
}

/** Adds the extrema that reach across 0 between samples of one sign. */
function withExtrema(
	marginDeg: (utcMs: number) => number,
	timesMs: ArrayLike<number>,
	margins: ArrayLike<number>
): { times: ArrayLike<number>; values: ArrayLike<number> } {
	const found: { utcMs: number; margin: number }[] = [];
	for (let i = 1; i < timesMs.length - 1; i += 1) {
		const before = margins[i - 1]!;
		const here = margins[i]!;
		const after = margins[i + 1]!;
		// Far from 0 against its own change, as almost everywhere.
		const change = Math.abs(before - here) + Math.abs(after - here);
		if (Math.abs(here) > 1.5 * change) continue;
		const sign = here > 0 ? 1 : -1;
		if (before > 0 !== here > 0 || after > 0 !== here > 0) continue;
		const reach = parabolaLowest(
			timesMs[i - 1]! - timesMs[i]!,
			timesMs[i + 1]! - timesMs[i]!,
			before * sign,
			here * sign,
			after * sign
		);
		// The parabola may be off by a part of the samples' spread: search whenever it comes near 0.
		const spread = Math.max(Math.abs(before - here), Math.abs(after - here));
		if (reach === null || reach > 0.5 * spread) continue;
		const extremum = lowest(marginDeg, sign, timesMs[i - 1]!, timesMs[i + 1]!);
		if (extremum.margin > 0 !== here > 0) found.push(extremum);
	}
	if (found.length === 0) return { times: timesMs, values: margins };
	const all = Array.from(margins, (margin, i) => ({ utcMs: timesMs[i]!, margin })).concat(found);
	all.sort((a, b) => a.utcMs - b.utcMs);
	return { times: all.map(({ utcMs }) => utcMs), values: all.map(({ margin }) => margin) };
}

/** Lowest value of the parabola through (left, a), (0, b), (right, c), when it lies between; else null. */
function parabolaLowest(
	left: number,
	right: number,
	a: number,
	b: number,
	c: number
): number | null {
	const slopeLeft = (b - a) / -left;
	const slopeRight = (c - b) / right;
	const curvature = (slopeRight - slopeLeft) / (right - left);
	if (!(curvature > 0)) return null;
	const slope = slopeLeft - curvature * left;
	const vertex = -slope / (2 * curvature);
	if (vertex < left || vertex > right) return null;
	return b + vertex * (slope + curvature * vertex);
}

/** Golden-section search of the lowest `sign × margin`; stops as soon as it is across 0. */
function lowest(
	marginDeg: (utcMs: number) => number,
	sign: number,
	fromMs: number,
	toMs: number
): { utcMs: number; margin: number } {
	const golden = (Math.sqrt(5) - 1) / 2;
	let [low, high] = [fromMs, toMs];
	let left = high - golden * (high - low);
	let right = low + golden * (high - low);
	let [leftValue, rightValue] = [sign * marginDeg(left), sign * marginDeg(right)];
	while (high - low > 500 && leftValue > 0 && rightValue > 0) {
		if (leftValue < rightValue) {
			[high, right, rightValue] = [right, left, leftValue];
			left = high - golden * (high - low);
			leftValue = sign * marginDeg(left);
		} else {
			[low, left, leftValue] = [left, right, rightValue];
			right = low + golden * (high - low);
			rightValue = sign * marginDeg(right);
		}
	}
	return leftValue < rightValue
		? { utcMs: left, margin: sign * leftValue }
		: { utcMs: right, margin: sign * rightValue };
}

/**
 * Bracketed root by false position with the Illinois weighting (Dowell & Jarratt 1971), halving every fourth
 * step; stops at 0.02 s or at a margin of 1e-8 degrees.
 */
function findRoot(
	marginDeg: (utcMs: number) => number,
	fromMs: number,
	toMs: number,
	fromMargin: number,
	toMargin: number
): number {
	let [a, b, fa, fb] = [fromMs, toMs, fromMargin, toMargin];
	for (let step = 1; step < 60 && Math.abs(b - a) > EDGE_TOLERANCE_MS; step += 1) {
		const secant = (a * fb - b * fa) / (fb - fa);
		const c = step % 4 === 0 || !Number.isFinite(secant) ? (a + b) / 2 : secant;
		const fc = marginDeg(c);
		if (Math.abs(fc) < 1e-8) return c;
		if (fc > 0 === fb > 0) fa /= 2;
		else [a, fa] = [b, fb];
		[b, fb] = [c, fc];
	}
	return b;
}
