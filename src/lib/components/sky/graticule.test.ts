import { describe, expect, it } from 'vitest';
import { fitChart } from './chartView';
import { chartGrid, decText, raText } from './graticule';
import { circleOutline } from './shapeOutline';

const size = { widthPx: 300, heightPx: 230, leastDeg: 1 / 3600 };

function chart(raDeg: number, decDeg: number, radiusDeg: number) {
	const centre = { raDeg, decDeg };
	return fitChart(centre, circleOutline(centre, radiusDeg), size);
}

describe('fitChart', () => {
	it('puts east to the left and north up', () => {
		const view = chart(83, -8, 2);
		const [x0 = 0, y0 = 0] = view.projection([83, -8]) ?? [];
		expect(view.projection([84, -8])?.[0]).toBeLessThan(x0);
		expect(view.projection([83, -7])?.[1]).toBeLessThan(y0);
	});

	it.each([
		[83, -8, 3],
		[0.01, 60, 2 / 60],
		[359.9999, -75, 3 / 3600],
		[200, 89.5, 5]
	])('holds a circle at RA %d, Dec %d of radius %d', (raDeg, decDeg, radiusDeg) => {
		const view = chart(raDeg, decDeg, radiusDeg);
		const points = circleOutline({ raDeg, decDeg }, radiusDeg).map(
			(point) => view.projection([point.raDeg, point.decDeg]) ?? [NaN, NaN]
		);
		const tops = points.map(([, y]) => y ?? NaN);
		expect(Math.min(...tops)).toBeGreaterThan(0);
		expect(Math.max(...tops)).toBeLessThan(230);
		// As large as the height allows: 84 % of it. The arcsecond case shows that digits suffice.
		expect(Math.max(...tops) - Math.min(...tops)).toBeCloseTo(230 * 0.84, 0);
	});
});

describe('chartGrid', () => {
	it.each([
		[83, -8, 3],
		[0, 20, 10],
		[40, 55, 1 / 60],
		[120, -30, 3 / 3600]
	])('labels both edges without crowding at RA %d, Dec %d, radius %d', (raDeg, decDeg, radius) => {
		const { raLabels, decLabels, lines } = chartGrid(chart(raDeg, decDeg, radius));
		expect(lines.length).toBeGreaterThan(3);
		expect(raLabels.length).toBeGreaterThan(0);
		expect(decLabels.length).toBeGreaterThan(0);
		for (const [i, label] of raLabels.entries()) {
			if (i > 0) expect(label.x - raLabels[i - 1]!.x).toBeGreaterThanOrEqual(62);
		}
	});

	it('draws all hours around a pole', () => {
		expect(chartGrid(chart(10, 89, 5)).lines.length).toBeGreaterThan(6);
	});
});

describe('labels', () => {
	it('are as fine as the step', () => {
		expect(raText(75, 15)).toBe('5h');
		expect(raText(83, 0.5)).toBe('5h32m');
		expect(raText(83.4, 0.05)).toBe('5h33m36s');
		expect(raText(-0.25, 0.25)).toBe('23h59m');
		expect(decText(-8, 1)).toBe('−8°');
		expect(decText(-8.2, 0.1)).toBe('−8°12′');
		expect(decText(0, 1)).toBe('0°');
	});
});
