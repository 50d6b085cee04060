import { expect } from 'vitest';
import { mocAreaDeg2, mocContains } from '../moc/moc';
import type { JointRegion } from '../regions/jointRegion';

/** What must hold of every region, whatever it was made from. */
export function expectSound(region: JointRegion): void {
	const { centre, area50Deg2, area90Deg2, points, moc50, moc90 } = region;
	const numbers = [centre.raDeg, centre.decDeg, area50Deg2, area90Deg2, region.equivalentRadiusDeg];
	for (const value of [...numbers, ...points.raDeg, ...points.decDeg]) {
		expect(Number.isFinite(value)).toBe(true);
	}
	expect(area50Deg2).toBeGreaterThan(0);
	expect(area90Deg2).toBeGreaterThan(area50Deg2);
	expect(moc50.length).toBeGreaterThan(0);
	expect(mocAreaDeg2(moc90)).toBeGreaterThan(0.99 * area90Deg2);
	expect(moc90.length).toBeLessThanOrEqual(4000);
	expect(points.probability.reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 9);
	expect(mocContains(moc90, centre)).toBe(true);
}
