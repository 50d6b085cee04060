import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import fixture from '../../../../fixtures/sky/caps.json';
import methods from '../../../../fixtures/sky/methods.json';
import { SKY_DEG2 } from '../angle';
import { arbitraryPosition } from '../testing/arbitraryPosition';
import { capAreaDeg2, capIntersectionDeg2, capRadiusDeg } from './cap';

describe('area common to two caps', () => {
	it('reads all 40 pairs', () => {
		expect(fixture.caps).toHaveLength(40);
	});

	it.each(fixture.caps)('agrees with 40 digits: $kind $r1° and $r2° at $sep_deg°', (row) => {
		const area = capIntersectionDeg2(
			{ centre: { raDeg: row.lon1, decDeg: row.lat1 }, radiusDeg: row.r1 },
			{ centre: { raDeg: row.lon2, decDeg: row.lat2 }, radiusDeg: row.r2 }
		);
		// Where they barely touch, rounding the separation alone changes a sliver by more.
		const relative = row.kind.startsWith('nearly_tangent') ? 1e-6 : 1e-9;
		const absolute = row.kind.startsWith('tangent') ? 1e-9 : 0;
		expect(Math.abs(area - row.area_deg2)).toBeLessThanOrEqual(relative * row.area_deg2 + absolute);
	});

	it.each(methods.caps)(
		'agrees with the textbook form: $r1Deg°, $r2Deg° at $distanceDeg°',
		(row) => {
			const area = capIntersectionDeg2(
				{ centre: { raDeg: 0, decDeg: 0 }, radiusDeg: row.r1Deg },
				{ centre: { raDeg: row.distanceDeg, decDeg: 0 }, radiusDeg: row.r2Deg }
			);
			expect(area).toBeCloseTo(row.areaDeg2, 4);
		}
	);

	it('is symmetric, no more than either cap, and whole with its complement', () => {
		const radii = fc.double({ min: 1e-4, max: 179.9, noNaN: true });
		fc.assert(
			fc.property(arbitraryPosition, radii, arbitraryPosition, radii, (a, ra, b, rb) => {
				const one = { centre: a, radiusDeg: ra };
				const other = { centre: b, radiusDeg: rb };
				const common = capIntersectionDeg2(one, other);
				expect(common).toBeGreaterThanOrEqual(0);
				expect(common).toBeLessThanOrEqual(Math.min(capAreaDeg2(ra), capAreaDeg2(rb)) * (1 + 1e-9));
				expect(capIntersectionDeg2(other, one)).toBeCloseTo(common, 7);
				const antipode = { raDeg: (b.raDeg + 180) % 360, decDeg: -b.decDeg };
				const rest = capIntersectionDeg2(one, { centre: antipode, radiusDeg: 180 - rb });
				expect(Math.abs(common + rest - capAreaDeg2(ra))).toBeLessThan(1e-6);
			})
		);
	});

	it('knows the area of a cap and back', () => {
		expect(capAreaDeg2(180)).toBeCloseTo(SKY_DEG2, 8);
		expect(capAreaDeg2(1 / 3600) / (Math.PI / 3600 ** 2)).toBeCloseTo(1, 9);
		expect(capRadiusDeg(capAreaDeg2(2 / 3600)) * 1800).toBeCloseTo(1, 12);
	});

	it('refuses a radius that is none', () => {
		const centre = { raDeg: 0, decDeg: 0 };
		expect(() => capIntersectionDeg2({ centre, radiusDeg: NaN }, { centre, radiusDeg: 1 })).toThrow(
			/a\.radiusDeg is NaN/
		);
	});
});
