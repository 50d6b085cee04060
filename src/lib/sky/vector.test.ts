import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import fixture from '../../../fixtures/sky/separation.json';
import { normaliseDeg } from './angle';
import { arbitraryPosition as equatorials } from './testing/arbitraryPosition';
import {
	angleBetweenDeg,
	deproject,
	offset,
	positionAngleDeg,
	project,
	separationDeg,
	toEquatorial,
	toVector
} from './vector';

describe('separation and position angle', () => {
	it('reads all 60 pairs', () => {
		expect(fixture.pairs).toHaveLength(60);
	});

	it.each(fixture.pairs)('agrees with 50-digit truth: $kind $lon1 $lat1', (pair) => {
		const a = { raDeg: pair.lon1, decDeg: pair.lat1 };
		const b = { raDeg: pair.lon2, decDeg: pair.lat2 };
		const truth = pair.sep_exact_deg;
		expect(Math.abs(separationDeg(a, b) - truth)).toBeLessThanOrEqual(1e-9 * truth + 1e-14);
		if (pair.pa_degenerate) return;
		const difference = Math.abs(positionAngleDeg(a, b) - pair.pa_exact_deg);
		expect(Math.min(difference, 360 - difference)).toBeLessThanOrEqual(
			Math.max(1e-9 * pair.pa_exact_deg, pair.pa_tol_deg ?? 0, 1e-13)
		);
	});

	// Meeus, Astronomical Algorithms, 2nd ed., example 17.a; figures from memory.
	it('gives 32.7930° from Arcturus to Spica', () => {
		const arcturus = { raDeg: 213.9154, decDeg: 19.1825 };
		const spica = { raDeg: 201.2983, decDeg: -11.1614 };
		expect(separationDeg(arcturus, spica)).toBeCloseTo(32.793, 4);
	});

	it('is symmetric and the same across RA 0', () => {
		fc.assert(
			fc.property(
				equatorials,
				equatorials,
				fc.double({ min: -720, max: 720, noNaN: true }),
				(a, b, turn) => {
					const turned = ({ raDeg, decDeg }: typeof a) => ({
						raDeg: normaliseDeg(raDeg + turn),
						decDeg
					});
					const there = separationDeg(a, b);
					expect(separationDeg(b, a)).toBeCloseTo(there, 11);
					expect(separationDeg(turned(a), turned(b))).toBeCloseTo(there, 9);
					expect(angleBetweenDeg(toVector(a), toVector(b))).toBeCloseTo(there, 10);
				}
			)
		);
	});
});

describe('offset and tangent plane', () => {
	it('lands at the distance and angle asked for', () => {
		const distances = fc.double({ min: 1e-6, max: 179, noNaN: true });
		const angles = fc.double({ min: 0, max: 359.99, noNaN: true });
		fc.assert(
			fc.property(equatorials, distances, angles, (centre, distanceDeg, angleDeg) => {
				const there = offset(centre, distanceDeg, angleDeg);
				expect(separationDeg(centre, there)).toBeCloseTo(distanceDeg, 9);
				if (Math.abs(centre.decDeg) > 89.99 || distanceDeg < 1e-3) return;
				const difference = Math.abs(positionAngleDeg(centre, there) - angleDeg);
				expect(Math.min(difference, 360 - difference)).toBeLessThan(1e-6);
			})
		);
	});

	it('comes back from the tangent plane, poles and RA 0 included', () => {
		fc.assert(
			fc.property(
				equatorials,
				fc.double({ min: 0, max: 80, noNaN: true }),
				(centre, distanceDeg) => {
					const position = offset(centre, distanceDeg, 77);
					const point = project(centre, position);
					if (!point) throw new Error('80° away is still on the plane');
					expect(separationDeg(deproject(centre, point), position)).toBeLessThan(1e-9);
				}
			)
		);
	});

	it('has no point on the plane for the far half of the sky', () => {
		expect(project({ raDeg: 10, decDeg: 20 }, { raDeg: 190, decDeg: -19 })).toBeNull();
	});

	it('round-trips unit vectors', () => {
		fc.assert(
			fc.property(equatorials, (position) => {
				expect(separationDeg(toEquatorial(toVector(position)), position)).toBeLessThan(1e-12);
			})
		);
	});
});
