import { describe, expect, it } from 'vitest';
import { coneMoc } from '../../sky/moc/coneMoc';
import { complement, difference } from '../../sky/moc/moc';
import { mocOutline } from '../../sky/moc/mocOutline';
import { areaPath, fitChart } from './chartView';
import { circleOutline } from './shapeOutline';

const centre = { raDeg: 0.5, decDeg: 20 };
const size = { widthPx: 400, heightPx: 400, leastDeg: 1e-3 };
const view = fitChart(centre, circleOutline(centre, 10), size);

/** Subpaths of an SVG path as lists of points. */
function subpaths(path: string): [x: number, y: number][][] {
	return path
		.split('M')
		.slice(1)
		.map((text) =>
			[...text.matchAll(/(-?[\d.]+),(-?[\d.]+)/g)].map((match): [number, number] => [
				Number(match[1]),
				Number(match[2])
			])
		);
}

describe('areas in a chart', () => {
	it('has north up and east to the left, across RA 0', () => {
		const east = coneMoc({ raDeg: 5.5, decDeg: 20 }, 1);
		const north = coneMoc({ raDeg: 359.9, decDeg: 25 }, 1);
		const [left = []] = subpaths(areaPath(view, mocOutline(east)));
		const [above = []] = subpaths(areaPath(view, mocOutline(north)));
		expect(left.length).toBeGreaterThan(20);
		expect(above.length).toBeGreaterThan(20);
		for (const [x] of left) expect(x).toBeLessThan(150);
		for (const [, y] of above) expect(y).toBeLessThan(150);
	});

	it('draws a hole as a ring of its own and no edge of the sky', () => {
		const ring = difference(coneMoc(centre, 8), coneMoc(centre, 4));
		const drawn = subpaths(areaPath(view, mocOutline(ring)));
		expect(drawn).toHaveLength(2);
		for (const [x, y] of drawn.flat()) {
			expect(Math.hypot(x - 200, y - 200)).toBeLessThan(9 * view.pxPerDeg);
		}
	});

	it('fills to the far side of the sky where the area reaches it', () => {
		const most = mocOutline(complement(coneMoc(centre, 10)));
		const farthest = Math.max(
			...subpaths(areaPath(view, most))
				.flat()
				.map(([x, y]) => Math.hypot(x - 200, y - 200))
		);
		expect(farthest).toBeGreaterThan(175 * view.pxPerDeg);
	});
});
