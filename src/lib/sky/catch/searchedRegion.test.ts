import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Equatorial } from '../angle';
import { jointRegion } from '../regions/jointRegion';
import type { Shape } from '../regions/shape';
import { expectSound } from '../testing/expectSound';
import { fieldContains, preparedField, tileAxes } from '../tiling/field';
import { offset, project, toVector } from '../vector';
import type { Detector } from '../visibility/telescope';
import { detectChance, DEFAULT_FADE } from './fade';
import { footprintSide } from '../tiling/footprintSide';
import type { NotFound } from './looks';
import { notFoundUpdate } from './notFoundUpdate';
import { searchedRegion } from './searchedRegion';

const HOUR_MS = 3_600_000;
const AT: Equatorial = { raDeg: 83.4, decDeg: -8.2 };

const circle = (centre: Equatorial, radiusDeg: number): Shape => ({
	kind: 'circle',
	centre,
	radiusDeg,
	containment: 0.9
});

const square = (sideDeg: number): Extract<Detector, { shape: 'rectangle' }> => ({
	shape: 'rectangle',
	widthDeg: sideDeg,
	heightDeg: sideDeg,
	rotationDeg: 0,
	offsetXDeg: 0,
	offsetYDeg: 0
});

function look(centre: Equatorial, detector: Detector, extra: Partial<NotFound> = {}): NotFound {
	return {
		tiles: [{ centre, rotationDeg: 0 }],
		detectors: [detector],
		limitMag: 22.2,
		atMs: HOUR_MS,
		...extra
	};
}

const search = (shapes: Shape[], reports: NotFound[], fade = DEFAULT_FADE) =>
	searchedRegion(shapes, reports, 0, fade);

/** Probability of the points on one side of the meridian through the centre. */
const shareEast = (points: { raDeg: number[]; probability: number[] }) =>
	points.probability.reduce((sum, p, i) => sum + (points.raDeg[i]! > AT.raDeg ? p : 0), 0);

describe('the region after looking and not finding', () => {
	it('is the joint region when nobody has looked', () => {
		const shapes = [circle(AT, 3), circle(offset(AT, 1, 40), 2)];
		const { region, ...chances } = search(shapes, []);
		expect(region).toEqual(jointRegion(shapes));
		expect(chances).toEqual({ nothingChance: 1, tooFaintChance: 0, elsewhereChance: 1 });
	});

	it('keeps (1 − qP)/2 : 1/2 of a Gaussian of which one half was searched', () => {
		// At the mean magnitude P is one half, q is 0.9; the field's edge is the meridian through the centre.
		const qP = 0.45;
		const east = look({ raDeg: AT.raDeg + 20, decDeg: 0 }, square(40));
		const narrow = { raDeg: AT.raDeg, decDeg: 0 };
		const { region, ...chances } = search([circle(narrow, 2)], [east]);
		expect(chances.nothingChance).toBeCloseTo(1 - qP / 2, 3);
		expect(chances.tooFaintChance).toBeCloseTo(0.25 / (1 - qP / 2), 3);
		expect(chances.elsewhereChance).toBeCloseTo(0.5 / (1 - qP / 2), 3);
		expect(shareEast(region.points)).toBeCloseTo((1 - qP) / 2 / (1 - qP / 2), 2);
		expect(region.centre.raDeg).toBeLessThan(AT.raDeg);
		expectSound(region);
	});

	it('has the highest-density areas of a flat circle by hand', () => {
		// Half of a uniform disc keeps 0.55: 50 % lies in the unsearched half, 90 % takes 1/2 + part of the other.
		const disc: Shape = {
			kind: 'hardCircle',
			centre: { raDeg: AT.raDeg, decDeg: 0 },
			radiusDeg: 2
		};
		const east = look({ raDeg: AT.raDeg + 20, decDeg: 0 }, square(40));
		const { region } = search([disc], [east]);
		const whole = jointRegion([disc]).area90Deg2 / 0.9;
		const left = 1 - 0.45 / 2;
		expect(region.area50Deg2 / (whole * 0.5 * left)).toBeCloseTo(1, 2);
		const outer = (0.9 - 0.5 / left) / (0.55 / left);
		expect(region.area90Deg2 / (whole * (0.5 + outer))).toBeCloseTo(1, 2);
	});

	it('finds the mass of a small field far out in a wide Gaussian', () => {
		const shapes = [circle(AT, 6)];
		const place = offset(AT, 4, 70);
		const sure = { ...DEFAULT_FADE, m1Spread: 0 };
		const { nothingChance } = search(
			shapes,
			[look(place, square(0.5), { limitMag: 30, completeness: 1 })],
			sure
		);
		// σ from the 90 % radius of a plane Gaussian; over half a degree of the field the density is near linear.
		const sigma = 6 / Math.sqrt(2 * Math.log(10));
		const mass = (0.25 / (2 * Math.PI * sigma ** 2)) * Math.exp(-16 / (2 * sigma ** 2));
		expect((1 - nothingChance) / mass).toBeCloseTo(1, 1);
		expect(Math.abs((1 - nothingChance) / mass - 1)).toBeLessThan(0.02);
	});

	it('leaves a small region whole when a field covers it, and says that it may be too faint', () => {
		const small = [circle(AT, 0.02)];
		const { region, ...chances } = search(small, [look(AT, square(1))]);
		expect(region).toEqual(jointRegion(small));
		expect(chances.nothingChance).toBeCloseTo(0.55, 6);
		expect(chances.tooFaintChance).toBeCloseTo(0.5 / 0.55, 6);
		expect(chances.elsewhereChance).toBe(0);
		const missed = search(small, [look(offset(AT, 3, 0), square(1))]);
		expect(missed.region).toEqual(region);
		expect(missed.elsewhereChance).toBe(1);
	});

	it('moves to the part nobody searched where regions stand apart', () => {
		const far = offset(AT, 40, 90);
		const apart = [circle(AT, 1), circle(far, 1.1)];
		const { region, nothingChance } = search(apart, [look(AT, square(10), { limitMag: 26 })]);
		const qP = 0.9 * detectChance(DEFAULT_FADE, 0, HOUR_MS, 26);
		expect(nothingChance).toBeCloseTo(1 - qP / 2, 3);
		expect(region.method).toBe('none');
		expect(region.centre.raDeg).toBeCloseTo(far.raDeg, 6);
		expectSound(region);
	});

	it('learns nothing from before the trigger, and nothing from a report that rules out everything', () => {
		const shapes = [circle(AT, 1)];
		const early = search(shapes, [look(AT, square(1), { atMs: -HOUR_MS })]);
		expect(early).toEqual(search(shapes, []));
		const sure = look(AT, square(60), { limitMag: 40, completeness: 1 });
		const against = search(shapes, [sure], { ...DEFAULT_FADE, m1Spread: 0 });
		expect(against.region).toEqual(jointRegion(shapes));
		expect(against.nothingChance).toBe(0);
	});

	it('agrees with the update of the region’s points', () => {
		const shapes: Shape[] = [
			{
				kind: 'ellipse',
				centre: AT,
				semiMajorDeg: 3,
				semiMinorDeg: 1,
				positionAngleDeg: 30,
				containment: 0.9
			}
		];
		const reports = [look(AT, square(1.5)), look(offset(AT, 1, 30), square(1), { limitMag: 24 })];
		const exact = search(shapes, reports);
		const points = notFoundUpdate(jointRegion(shapes).points, reports, 0, DEFAULT_FADE);
		expect(exact.nothingChance).toBeCloseTo(points.nothingChance, 1);
		expect(exact.tooFaintChance).toBeCloseTo(points.tooFaintChance, 1);
		expectSound(exact.region);
	});

	it('does not depend on the order and is sound, whatever was searched', () => {
		const place = fc.record({
			distanceDeg: fc.double({ min: 0, max: 4, noNaN: true }),
			angleDeg: fc.double({ min: 0, max: 360, noNaN: true }),
			sideDeg: fc.double({ min: 0.1, max: 5, noNaN: true }),
			limitMag: fc.double({ min: 16, max: 27, noNaN: true }),
			round: fc.boolean()
		});
		const centre = fc.record({
			raDeg: fc.double({ min: 0, max: 359.99, noNaN: true }),
			decDeg: fc.double({ min: -90, max: 90, noNaN: true })
		});
		const check = fc.property(
			centre,
			fc.array(place, { minLength: 1, maxLength: 4 }),
			fc.boolean(),
			(at, places, hard) => {
				const reports = places.map(({ distanceDeg, angleDeg, sideDeg, limitMag, round }) =>
					look(
						offset(at, distanceDeg, angleDeg),
						round
							? { shape: 'circle', radiusDeg: sideDeg / 2, offsetXDeg: 0, offsetYDeg: 0 }
							: square(sideDeg),
						{ limitMag }
					)
				);
				const shapes: Shape[] = [
					hard ? { kind: 'hardCircle', centre: at, radiusDeg: 2 } : circle(at, 2)
				];
				const there = search(shapes, reports);
				expect(search(shapes, reports.toReversed())).toEqual(there);
				expectSound(there.region);
				const { nothingChance, tooFaintChance, elsewhereChance } = there;
				expect(nothingChance).toBeGreaterThan(0);
				expect(nothingChance).toBeLessThanOrEqual(1);
				expect(tooFaintChance + elsewhereChance).toBeLessThanOrEqual(1 + 1e-9);
			}
		);
		fc.assert(check, { numRuns: 10 });
	}, 60_000);
});

describe('the side of a footprint that a disc lies on', () => {
	it('is never inside or outside where a place of the disc says otherwise', () => {
		const check = fc.property(
			fc.double({ min: 0, max: 12, noNaN: true }),
			fc.double({ min: 0, max: 360, noNaN: true }),
			fc.double({ min: 0.01, max: 6, noNaN: true }),
			fc.boolean(),
			(distanceDeg, angleDeg, reachDeg, round) => {
				const detectors: Detector[] = [
					round
						? { shape: 'circle', radiusDeg: 4, offsetXDeg: 1, offsetYDeg: -0.5 }
						: { ...square(8), rotationDeg: 25, offsetXDeg: 1 }
				];
				const field = preparedField(detectors);
				const middle = offset(AT, distanceDeg, angleDeg);
				const axes = tileAxes({ centre: AT, rotationDeg: 0 });
				const side = footprintSide(field, axes, toVector(middle), (reachDeg * Math.PI) / 180);
				for (let i = 0; i < 24; i++) {
					const on = project(AT, offset(middle, reachDeg * 0.999, i * 15));
					const radians = Math.PI / 180;
					const held =
						on !== null && fieldContains(field, on.eastDeg * radians, on.northDeg * radians);
					if (side === 'inside') expect(held).toBe(true);
					if (side === 'outside') expect(held).toBe(false);
				}
			}
		);
		fc.assert(check, { numRuns: 200 });
	});
});
