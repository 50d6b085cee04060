import type { Vector } from '../vector';

/** A vector function of time as Chebyshev series over [startMs, endMs]; coefficients by component. */
export type VectorSeries = {
	startMs: number;
	endMs: number;
	degree: number;
	x: Float64Array;
	y: Float64Array;
	z: Float64Array;
};

/** Interpolates `sample` at the Chebyshev nodes of the span: `degree` + 1 evaluations. */
export function vectorSeries(
	sample: (utcMs: number) => Vector,
	startMs: number,
	endMs: number,
	degree: number
): VectorSeries {
	const nodes = degree + 1;
	const values = Array.from({ length: nodes }, (_, k) =>
		sample(startMs + ((endMs - startMs) * (1 + Math.cos((Math.PI * (k + 0.5)) / nodes))) / 2)
	);
	const coefficients = (component: 'x' | 'y' | 'z') =>
		Float64Array.from({ length: nodes }, (_, j) => {
			const sum = values.reduce(
				(total, value, k) => total + value[component] * Math.cos((Math.PI * j * (k + 0.5)) / nodes),
				0
			);
			return (sum * (j === 0 ? 1 : 2)) / nodes;
		});
	return {
		startMs,
		endMs,
		degree,
		x: coefficients('x'),
		y: coefficients('y'),
		z: coefficients('z')
	};
}

/** The vector at an instant of the span, by Clenshaw's recurrence. */
export function evaluateSeries(series: VectorSeries, utcMs: number): Vector {
	const u = (2 * (utcMs - series.startMs)) / (series.endMs - series.startMs) - 1;
	const { x, y, z } = series;
	const twice = 2 * u;
	let x1 = 0;
	let x2 = 0;
	let y1 = 0;
	let y2 = 0;
	let z1 = 0;
	let z2 = 0;
	for (let j = series.degree; j > 0; j -= 1) {
		const x0 = twice * x1 - x2 + x[j]!;
		const y0 = twice * y1 - y2 + y[j]!;
		const z0 = twice * z1 - z2 + z[j]!;
		x2 = x1;
		x1 = x0;
		y2 = y1;
		y1 = y0;
		z2 = z1;
		z1 = z0;
	}
	return { x: u * x1 - x2 + x[0]!, y: u * y1 - y2 + y[0]!, z: u * z1 - z2 + z[0]! };
}
