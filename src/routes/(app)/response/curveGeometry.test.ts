import { describe, expect, it } from 'vitest';
import type { WaitingCurve } from '$lib/domain/response';
import { bandPath, curvePath, curveScales, type Frame } from './curveGeometry';

const frame: Frame = {
	widthPx: 500,
	heightPx: 200,
	leftPx: 50,
	rightPx: 0,
	topPx: 0,
	bottomPx: 0
};
const curve: WaitingCurve = {
	count: 2,
	ended: 2,
	steps: [
		{ timeS: 600, share: 0.5, lower: 0.1, upper: 0.9 },
		{ timeS: 3600, share: 0, lower: null, upper: null }
	],
	censored: [],
	medianS: 600,
	medianLowerS: 600,
	medianUpperS: null
};

describe('the waiting curve’s drawing', () => {
	const scales = curveScales(curve, frame);

	it('is logarithmic from one minute', () => {
		expect(scales.endS).toBe(3600);
		expect(scales.x(60)).toBe(50);
		expect(scales.x(3600)).toBeCloseTo(500, 9);
		expect(scales.x(600)).toBeCloseTo(50 + (450 * Math.log(10)) / Math.log(60), 9);
		expect(scales.x(5)).toBe(50);
		expect(scales.axis.map(({ label }) => label)).toEqual(['1 min', '10 min', '1 h']);
	});

	it('goes down in steps and on to the end', () => {
		expect(curvePath(curve, scales)).toBe('M50,0H303.1V100H500V200H500');
	});

	it('has a band only while limits are known', () => {
		expect(bandPath(curve, scales)).toBe('M303.1,20V20H500V180H303.1Z');
		expect(bandPath({ ...curve, steps: [] }, scales)).toBe('');
	});

	it('leaves out labels for which a phone has no room', () => {
		const long = { ...curve, steps: [{ timeS: 80_000, share: 0.5, lower: 0.1, upper: 0.9 }] };
		const labels = (widthPx: number) =>
			curveScales(long, { ...frame, widthPx }).axis.map(({ label }) => label);
		expect(labels(500)).toEqual(['1 min', '10 min', '1 h', '6 h', '24 h']);
		expect(labels(320)).toEqual(['1 min', '10 min', '1 h', '24 h']);
	});
});
