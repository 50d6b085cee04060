import type { WaitingCurve } from '$lib/domain/response';

/** Pixels of the drawing; the curve lies between the margins. */
export type Frame = {
	widthPx: number;
	heightPx: number;
	leftPx: number;
	rightPx: number;
	topPx: number;
	bottomPx: number;
};

const MINUTE_S = 60;
/** Times on the axis, each with the narrowest drawing that has room for its label. */
const AXIS_TIMES = [
	{ timeS: MINUTE_S, label: '1 min', fromPx: 0 },
	{ timeS: 10 * MINUTE_S, label: '10 min', fromPx: 0 },
	{ timeS: 60 * MINUTE_S, label: '1 h', fromPx: 0 },
	{ timeS: 6 * 60 * MINUTE_S, label: '6 h', fromPx: 420 },
	{ timeS: 24 * 60 * MINUTE_S, label: '24 h', fromPx: 0 },
	{ timeS: 72 * 60 * MINUTE_S, label: '72 h', fromPx: 420 }
];

/** Logarithmic from 1 minute to the first axis time that holds everything; shorter times stand at the edge. */
export function curveScales(curve: WaitingCurve, frame: Frame) {
	const longestS = Math.max(
		curve.steps.at(-1)?.timeS ?? 0,
		Math.min(curve.censored.at(-1)?.timeS ?? 0, 24 * 3600)
	);
	const endS =
		AXIS_TIMES.find(({ timeS }) => timeS >= Math.max(longestS, 3600))?.timeS ??
		AXIS_TIMES.at(-1)!.timeS;
	const spanPx = frame.widthPx - frame.leftPx - frame.rightPx;
	const decades = Math.log10(endS / MINUTE_S);
	const x = (timeS: number) => {
		const clamped = Math.min(Math.max(timeS, MINUTE_S), endS);
		return frame.leftPx + (Math.log10(clamped / MINUTE_S) / decades) * spanPx;
	};
	const y = (share: number) =>
		frame.topPx + (1 - share) * (frame.heightPx - frame.topPx - frame.bottomPx);
	const axis = AXIS_TIMES.filter(
		({ timeS, fromPx }) => timeS <= endS && frame.widthPx >= fromPx
	).map(({ timeS, label }) => ({ x: x(timeS), label }));
	return { x, y, axis, endS };
}

type Scales = ReturnType<typeof curveScales>;

/** The stepped line of the curve, an SVG path. */
export function curvePath(curve: WaitingCurve, { x, y, endS }: Scales): string {
	const steps = curve.steps.map(({ timeS, share }) => `H${px(x(timeS))}V${px(y(share))}`);
	return `M${px(x(0))},${px(y(1))}${steps.join('')}H${px(x(endS))}`;
}

/** The 95 % band, as a path; it ends where the curve reaches 0 and no limits are known. */
export function bandPath(curve: WaitingCurve, { x, y, endS }: Scales): string {
	const known = curve.steps.filter(({ lower, upper }) => lower !== null && upper !== null);
	const first = known[0];
	if (!first) return '';
	const until = (index: number) =>
		curve.steps[curve.steps.indexOf(known[index]!) + 1]?.timeS ?? endS;
	const upper = known.map((step, index) => `V${px(y(step.upper!))}H${px(x(until(index)))}`);
	const lower = known.map((step) => `V${px(y(step.lower!))}H${px(x(step.timeS))}`).reverse();
	// Right to left: each lower limit holds from its step to the next.
	return `M${px(x(first.timeS))},${px(y(first.upper!))}${upper.join('')}${lower.join('')}Z`;
}

function px(value: number): string {
	return String(Math.round(value * 10) / 10);
}
