import { expect, test } from 'vitest';
import { demoRandom, lognormalDelays } from './demoRandom';

test('the same seed draws the same numbers, evenly over [0, 1)', () => {
	const draws = Array.from({ length: 4000 }, demoRandom(7).next);
	expect(draws).toEqual(Array.from({ length: 4000 }, demoRandom(7).next));
	expect(Math.min(...draws)).toBeGreaterThanOrEqual(0);
	expect(Math.max(...draws)).toBeLessThan(1);
	expect(draws.reduce((sum, draw) => sum + draw, 0) / 4000).toBeCloseTo(0.5, 1);
});

test('waiting times have the median and the 90 % point asked for, and hard cases take longer', () => {
	const random = demoRandom(3);
	const hardness = Array.from({ length: 201 }, random.normal);
	const delays = lognormalDelays(random, hardness, { medianS: 160, ninetyPercentS: 665 });
	const sorted = [...delays].sort((a, b) => a - b);
	expect(sorted[100]).toBeCloseTo(160, 0);
	expect(sorted[180]! / 665).toBeCloseTo(1, 1);
	expect(delays).not.toEqual(sorted);
	const hard = delays.filter((_, index) => hardness[index]! > 1);
	const easy = delays.filter((_, index) => hardness[index]! < -1);
	expect(Math.min(...hard)).toBeGreaterThan(Math.min(...easy));
	const mean = (list: number[]) => list.reduce((sum, one) => sum + Math.log(one), 0) / list.length;
	expect(mean(hard)).toBeGreaterThan(mean(easy) + 1);
});
