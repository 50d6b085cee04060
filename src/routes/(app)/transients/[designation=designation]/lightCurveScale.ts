/** Where things stand in the picture of a light curve. */
export type CurveScale = {
	x: (hours: number) => number;
	y: (magnitude: number) => number;
	hourTicks: number[];
	magnitudeTicks: number[];
};

const HOURS = [0.01, 0.03, 0.1, 0.3, 1, 3, 10, 30, 100, 300, 1000];

/** Logarithmic time to the right, faint magnitudes down; with a margin around what was measured. */
export function curveScale(
	points: readonly { hours: number; magnitude: number }[],
	box: { left: number; right: number; top: number; bottom: number }
): CurveScale {
	const logs = points.map(({ hours }) => Math.log10(Math.max(hours, 0.005)));
	const magnitudes = points.map(({ magnitude }) => magnitude);
	const [fromLog, toLog] = [Math.min(...logs) - 0.25, Math.max(...logs) + 0.25];
	const bright = Math.floor(Math.min(...magnitudes) - 0.5);
	const faint = Math.ceil(Math.max(...magnitudes) + 0.5);
	const step = faint - bright > 8 ? 2 : 1;
	return {
		x: (hours) =>
			box.left +
			((Math.log10(Math.max(hours, 0.005)) - fromLog) / (toLog - fromLog)) * (box.right - box.left),
		y: (magnitude) => box.top + ((magnitude - bright) / (faint - bright)) * (box.bottom - box.top),
		hourTicks: HOURS.filter((hours) => Math.log10(hours) >= fromLog && Math.log10(hours) <= toLog),
		magnitudeTicks: Array.from(
			{ length: Math.floor((faint - bright) / step) + 1 },
			(_, i) => bright + i * step
		)
	};
}
