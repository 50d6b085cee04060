import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import healpix from '../../../../fixtures/sky/healpix.json';
import methods from '../../../../fixtures/sky/methods.json';
import { mocContains } from '../moc/moc';
import { arbitraryPosition } from '../testing/arbitraryPosition';
import { offset, separationDeg } from '../vector';
import { capIntersectionDeg2 } from './cap';
import { radiusFromSigma } from './containment';
import { densityOf } from './density/densityOf';
import { expectSound } from '../testing/expectSound';
import { jointRegion } from './jointRegion';
import { buildMesh } from './mesh';
import { meshRegion } from './meshRegion';
import type { CircleShape, EllipseShape, HardCircleShape, MapShape, Shape } from './shape';

function circle(raDeg: number, decDeg: number, radiusDeg: number, containment = 0.9): CircleShape {
	return { kind: 'circle', centre: { raDeg, decDeg }, radiusDeg, containment };
}

function hardCircle(raDeg: number, decDeg: number, radiusDeg: number): HardCircleShape {
	return { kind: 'hardCircle', centre: { raDeg, decDeg }, radiusDeg };
}

const onMesh = (parts: Shape[]) => meshRegion(buildMesh(parts.map(densityOf)).cells);

describe('joint region of circles', { timeout: 60_000 }, () => {
	it('combines σ 3° and 2°, 4° apart, as on a flat sky', () => {
		const { sigmasDeg, separationDeg: apart, sigmaDeg, fromFirstDeg } = methods.combination;
		const [first = NaN, second = NaN] = sigmasDeg;
		const a = circle(50, 0, radiusFromSigma(first, 0.9));
		const region = jointRegion([a, circle(50, apart, radiusFromSigma(second, 0.9))]);
		expect(region.method).toBe('closed');
		expect(Math.abs((region.sigmaDeg ?? NaN) / sigmaDeg - 1)).toBeLessThan(0.001);
		expect(Math.abs(separationDeg(a.centre, region.centre) / fromFirstDeg - 1)).toBeLessThan(0.001);
	});

	it.each(healpix.credible)(
		'has the exact area at σ $sigma_deg°, $level, and the mesh agrees',
		(row) => {
			const part = circle(123.4, -23.4, radiusFromSigma(row.sigma_deg, 0.6827), 0.6827);
			const closed = jointRegion([part]);
			const mesh = onMesh([part]);
			if (row.level !== 0.5 && row.level !== 0.9) return;
			const key = row.level === 0.5 ? 'area50Deg2' : 'area90Deg2';
			expect(Math.abs(closed[key] / row.fisher_deg2 - 1)).toBeLessThan(1e-9);
			expect(Math.abs(mesh[key] / row.fisher_deg2 - 1)).toBeLessThan(0.01);
		}
	);

	it.each<[string, CircleShape[]]>([
		['3°, 2°, 2′', [circle(83, -8, 3), circle(84, -7, 2), circle(83.5, -7.6, 2 / 60)]],
		['at the pole', [circle(0, 90, 3), circle(120, 88, 2)]],
		['across RA 0', [circle(359.5, 41.8, 1), circle(0.5, 41.8, 1)]],
		['arcseconds', [circle(10, 42, 5 / 3600), circle(10.0005, 42, 3 / 3600)]],
		['degrees and half an arcsecond', [circle(10, 42, 3), circle(10, 42, 0.5 / 3600)]],
		['tens of degrees', [circle(0, 0, 30), circle(340, 10, 40)]]
	])('is the same by the closed form and on the mesh: %s', (_, parts) => {
		const closed = jointRegion(parts);
		const mesh = onMesh(parts);
		expectSound(closed);
		expectSound(mesh);
		expect(Math.abs(mesh.area50Deg2 / closed.area50Deg2 - 1)).toBeLessThan(0.01);
		expect(Math.abs(mesh.area90Deg2 / closed.area90Deg2 - 1)).toBeLessThan(0.01);
		expect(separationDeg(mesh.centre, closed.centre)).toBeLessThan(0.01 * (closed.sigmaDeg ?? 0));
		expect(mesh.moc90.length).toBeGreaterThan(10);
	});

	it('halves the variance of identical arcsecond circles', () => {
		const part = circle(83.4, -8.2, 2 / 3600);
		const one = jointRegion([part]);
		const two = jointRegion([part, part]);
		expectSound(two);
		expect((two.sigmaDeg ?? 0) / (one.sigmaDeg ?? 1)).toBeCloseTo(Math.SQRT1_2, 9);
		expect(separationDeg(two.centre, part.centre)).toBeLessThan(1e-10);
	});

	it('turns with the sky', () => {
		const radii = fc.double({ min: -3.5, max: 1.3, noNaN: true }).map((power) => 10 ** power);
		const angles = fc.double({ min: 0, max: 360, noNaN: true });
		fc.assert(
			fc.property(
				arbitraryPosition,
				arbitraryPosition,
				radii,
				radii,
				angles,
				(here, there, r1, r2, angle) => {
					const pairAt = (centre: typeof here) => {
						const other = offset(centre, Math.hypot(r1, r2) / 2, angle);
						return jointRegion([
							circle(centre.raDeg, centre.decDeg, r1),
							circle(other.raDeg, other.decDeg, r2)
						]);
					};
					const one = pairAt(here);
					const other = pairAt(there);
					expect(one.method).toBe(other.method);
					expect(Math.abs(one.area90Deg2 / other.area90Deg2 - 1)).toBeLessThan(1e-6);
					const distances = [separationDeg(here, one.centre), separationDeg(there, other.centre)];
					expect(Math.abs((distances[0] ?? 0) - (distances[1] ?? 0))).toBeLessThan(
						1e-6 * Math.max(r1, r2) + 1e-11
					);
				}
			),
			{ numRuns: 60 }
		);
	});

	it('only shrinks as parts that agree arrive', () => {
		const parts = [circle(83, -8, 3), circle(84, -7, 2), circle(83.5, -7.6, 2 / 60)];
		const areas = parts.map((_, i) => jointRegion(parts.slice(0, i + 1)).area90Deg2);
		expect(areas[1]).toBeLessThan(areas[0] ?? 0);
		expect(areas[2]).toBeLessThan(areas[1] ?? 0);
	});
});

describe('joint region of other shapes', { timeout: 60_000 }, () => {
	it.each([
		[5, 4, 4],
		[5, 4, 8.99],
		[30, 60, 40],
		[0.001, 0.001, 0.001]
	])('has the area common to hard circles of %d° and %d°, %d° apart', (r1, r2, apart) => {
		const a = { centre: { raDeg: 10, decDeg: 30 }, radiusDeg: r1 };
		const b = { centre: offset(a.centre, apart, 70), radiusDeg: r2 };
		const region = jointRegion([
			{ kind: 'hardCircle', ...a },
			{ kind: 'hardCircle', ...b }
		]);
		expect(region.method).toBe('mesh');
		expectSound(region);
		expect(Math.abs(region.area90Deg2 / (0.9 * capIntersectionDeg2(a, b)) - 1)).toBeLessThan(0.01);
		expect(Math.abs(region.area50Deg2 / (0.5 * capIntersectionDeg2(a, b)) - 1)).toBeLessThan(0.01);
	});

	it('has the area π a b of an ellipse, thin ones included', () => {
		for (const [semiMajorDeg, semiMinorDeg] of [
			[0.3, 0.1],
			[0.8, 0.02],
			[2 / 3600, 1 / 3600]
		] as const) {
			const shape: EllipseShape = {
				kind: 'ellipse',
				centre: { raDeg: 0.1, decDeg: 85 },
				semiMajorDeg,
				semiMinorDeg,
				positionAngleDeg: 33,
				containment: 0.9
			};
			const region = jointRegion([shape]);
			expectSound(region);
			expect(
				Math.abs(region.area90Deg2 / (Math.PI * semiMajorDeg * semiMinorDeg) - 1)
			).toBeLessThan(0.01);
			expect(mocContains(region.moc90, offset(shape.centre, 0.95 * semiMajorDeg, 33))).toBe(true);
			expect(mocContains(region.moc90, offset(shape.centre, 0.95 * semiMajorDeg, 123))).toBe(false);
		}
	});

	it('has the area of a narrow ring, and a centre on it', () => {
		const centre = { raDeg: 10, decDeg: 0 };
		const region = jointRegion([
			{ kind: 'annulus', centre, radiusDeg: 40, halfWidthDeg: 0.5, containment: 0.9 }
		]);
		const ringDeg2 = 2 * Math.PI * Math.sin((40 * Math.PI) / 180) * (180 / Math.PI);
		expectSound(region);
		expect(Math.abs(region.area90Deg2 / ringDeg2 - 1)).toBeLessThan(0.01);
		expect(Math.abs(separationDeg(region.centre, centre) - 40)).toBeLessThan(0.5);
	});

	it('follows an arcsecond circle inside a broad shape', () => {
		const small = circle(12, 0, 4 / 3600);
		const region = jointRegion([hardCircle(10, 0, 5), small]);
		expectSound(region);
		expect(Math.abs(region.area90Deg2 / jointRegion([small]).area90Deg2 - 1)).toBeLessThan(0.01);
	});

	it('reads the reference map: 90 % area 130.2 deg², 50 % 39.2 deg²', () => {
		const map = referenceMap();
		const region = jointRegion([map]);
		expectSound(region);
		expect(Math.abs(region.area90Deg2 / 130.195 - 1)).toBeLessThan(0.01);
		expect(Math.abs(region.area50Deg2 / 39.24 - 1)).toBeLessThan(0.01);
		// With a circle it is the product of the two Fisher densities.
		const sigmaPart = circle(148.88821, 69.06529, radiusFromSigma(3, 0.9));
		const other = circle(152, 70, 2);
		const closed = jointRegion([sigmaPart, other]);
		const joint = jointRegion([map, other]);
		expect(Math.abs(joint.area90Deg2 / closed.area90Deg2 - 1)).toBeLessThan(0.01);
		expect(separationDeg(joint.centre, closed.centre)).toBeLessThan(0.02 * (closed.sigmaDeg ?? 0));
	});
});

/** Reads UNIQ (int64) and PROBDENSITY (double) rows of the reference map. */
function referenceMap(): MapShape {
	const bytes = readFileSync('fixtures/sky/mo_gauss3deg.fits');
	let start = 0;
	for (let headers = 0; headers < 2; headers++) {
		while (!/(^|.{80})END {77}/s.test(bytes.toString('latin1', start, start + 2880))) start += 2880;
		start += 2880;
	}
	const rows = Number(/NAXIS2 *= *(\d+)/.exec(bytes.toString('latin1'))?.[1]);
	const map: MapShape = { kind: 'map', uniq: [], density: [] };
	for (let row = 0; row < rows; row++) {
		map.uniq.push(Number(bytes.readBigInt64BE(start + 16 * row)));
		map.density.push(bytes.readDoubleBE(start + 16 * row + 8));
	}
	return map;
}
