import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import healpix from '../../../../fixtures/sky/healpix.json';
import methods from '../../../../fixtures/sky/methods.json';
import {
	addInQuadrature,
	areaFromKappa,
	containmentFactor1d,
	containmentFactor2d,
	containmentOfRadius,
	kappaFromRadius,
	radiusFromKappa,
	radiusFromSigma,
	sigmaFromKappa,
	sigmaFromRadius
} from './containment';

describe('containment', () => {
	it.each(methods.containment_2d)('puts %d of a flat Gaussian within %d σ', (share, factor) => {
		expect(Math.abs(containmentFactor2d(share ?? NaN) - (factor ?? NaN))).toBeLessThan(1e-4);
	});

	it.each(methods.containment_1d)('puts %d of a 1-D Gaussian within ±%d σ', (share, factor) => {
		expect(Math.abs(containmentFactor1d(share ?? NaN) - (factor ?? NaN))).toBeLessThan(1e-4);
	});

	it.each(methods.kappa_from_68_27)('finds κ of a $radiusDeg° circle at 68.27 %', (row) => {
		const kappa = kappaFromRadius(row.radiusDeg, 0.6827);
		expect(Math.abs(kappa / row.kappa - 1)).toBeLessThan(2e-5);
		expect(Math.abs(radiusFromKappa(kappa, 0.9) - row.r90Deg)).toBeLessThan(6e-5);
	});

	it('reads all 16 rows of radii and areas', () => {
		expect(healpix.credible).toHaveLength(16);
	});

	it.each(healpix.credible)('gives radius and area at σ $sigma_deg°, $level', (row) => {
		expect(
			Math.abs(radiusFromSigma(row.sigma_deg, row.level) / row.fisher_radius_deg - 1)
		).toBeLessThan(1e-9);
		expect(Math.abs(areaFromKappa(row.kappa, row.level) / row.fisher_deg2 - 1)).toBeLessThan(1e-9);
	});

	it('adds a systematic error in quadrature', () => {
		const [stat = NaN, sys = NaN, sum = NaN] = methods.quadrature;
		expect(addInQuadrature(stat, sys)).toBeCloseTo(sum, 12);
	});

	it('comes back from radius to radius, arcseconds to the whole sky', () => {
		const radii = fc.double({ min: -5, max: 2, noNaN: true }).map((power) => 10 ** power);
		const shares = fc.double({ min: 0.05, max: 0.999, noNaN: true });
		fc.assert(
			fc.property(radii, shares, (radiusDeg, share) => {
				const kappa = kappaFromRadius(radiusDeg, share);
				if (kappa < 1e-6) return;
				expect(Math.abs(radiusFromKappa(kappa, share) / radiusDeg - 1)).toBeLessThan(1e-7);
				expect(Math.abs(containmentOfRadius(kappa, radiusDeg) - share)).toBeLessThan(1e-9);
			})
		);
	});

	it('grows with the share', () => {
		const sigmas = fc.double({ min: 1e-4, max: 60, noNaN: true });
		const shares = fc.double({ min: 0.01, max: 0.98, noNaN: true });
		fc.assert(
			fc.property(sigmas, shares, (sigmaDeg, share) => {
				expect(radiusFromSigma(sigmaDeg, share + 0.01)).toBeGreaterThan(
					radiusFromSigma(sigmaDeg, share)
				);
			})
		);
	});

	it('takes a circle wider than a uniform sky allows as saying nothing', () => {
		expect(kappaFromRadius(150, 0.9)).toBe(0);
		expect(sigmaFromKappa(0)).toBe(Infinity);
	});

	it('names what is wrong', () => {
		expect(() => sigmaFromRadius(1, 1)).toThrow(/containment is 1/);
		expect(() => sigmaFromRadius(0, 0.9)).toThrow(/radiusDeg is 0/);
		expect(() => radiusFromSigma(-1, 0.9)).toThrow(/sigmaDeg is -1/);
	});
});
