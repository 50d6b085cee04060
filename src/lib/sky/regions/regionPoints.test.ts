import { describe, expect, it } from 'vitest';
import { separationDeg } from '../vector';
import { fisherPoints, regionOutlinePoints } from './regionPoints';

const centre = { raDeg: 359.9, decDeg: 62 };

describe('drawing a region', () => {
	it('puts a circle at its radius', () => {
		const outline = regionOutlinePoints(centre, 2 / 3600, 24);
		expect(outline).toHaveLength(24);
		for (const point of outline) expect(separationDeg(point, centre) * 1800).toBeCloseTo(1, 8);
	});
});

describe('points of a Fisher density', () => {
	it('hold the shares that circles hold, and average to the centre', () => {
		const kappa = 1 / (Math.PI / 180) ** 2;
		const points = fisherPoints(centre, kappa, 200);
		const within = (radiusDeg: number) =>
			points.probability.reduce((sum, probability, i) => {
				const at = { raDeg: points.raDeg[i] ?? 0, decDeg: points.decDeg[i] ?? 0 };
				return separationDeg(at, centre) <= radiusDeg ? sum + probability : sum;
			}, 0);
		expect(within(1.1774)).toBeCloseTo(0.5, 2);
		expect(within(2.146)).toBeCloseTo(0.9, 2);
		expect(within(4)).toBeCloseTo(1, 9);
	});
});
