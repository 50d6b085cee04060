import { expect, test } from 'vitest';
import { horizonAltDeg } from '$lib/sky/visibility/horizonMask';
import { maskProfile } from './maskProfile';

test('without a mask the lowest altitude runs all around', () => {
	expect(maskProfile([], 20)).toEqual([
		{ azDeg: 0, altDeg: 20 },
		{ azDeg: 360, altDeg: 20 }
	]);
});

test('the drawn line is the horizon that the windows are computed with', () => {
	const mask = [
		{ azDeg: 60, altDeg: 15 },
		{ azDeg: 160, altDeg: 31 },
		{ azDeg: 250, altDeg: 18 }
	];
	const profile = maskProfile(mask, 20);
	expect(profile[0]!.azDeg).toBe(0);
	expect(profile.at(-1)!.azDeg).toBe(360);
	for (const { azDeg, altDeg } of profile) {
		expect(altDeg).toBeCloseTo(Math.max(20, horizonAltDeg(mask, azDeg % 360)), 9);
	}
	// Corners are where the mask rises through the lowest altitude: 20° between azimuths 60 and 160.
	expect(profile.some(({ azDeg }) => Math.abs(azDeg - 91.25) < 1e-9)).toBe(true);
});
