import { describe, expect, it } from 'vitest';
import { curveScale } from './lightCurveScale';

const box = { left: 40, right: 400, top: 10, bottom: 200 };

describe('curveScale', () => {
	const scale = curveScale(
		[
			{ hours: 0.5, magnitude: 17.2 },
			{ hours: 20, magnitude: 21.4 }
		],
		box
	);
	it('puts later to the right and fainter down, inside the box', () => {
		expect(scale.x(20)).toBeGreaterThan(scale.x(0.5));
		expect(scale.y(21.4)).toBeGreaterThan(scale.y(17.2));
		expect(scale.x(0.5)).toBeGreaterThan(box.left);
		expect(scale.y(21.4)).toBeLessThan(box.bottom);
	});
	it('gives equal steps to equal ratios of time', () => {
		expect(scale.x(10) - scale.x(1)).toBeCloseTo(scale.x(100) - scale.x(10), 9);
	});
	it('holds one point alone', () => {
		const alone = curveScale([{ hours: 1, magnitude: 19 }], box);
		expect(alone.x(1)).toBeCloseTo(220, 9);
		expect(alone.magnitudeTicks).toEqual([18, 19, 20]);
	});
});
