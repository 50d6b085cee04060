import { describe, expect, it } from 'vitest';
import methods from '../../../../fixtures/sky/methods.json';
import {
	agreementOdds,
	agreementVerdict,
	expectedChanceAlerts,
	JOIN_LOG_ODDS,
	logBayesFactor,
	logBayesOfJoining,
	logPriorOdds,
	priorOdds,
	START_LOG_ODDS
} from './agreement';
import { radiusFromSigma } from './containment';
import type { CircleShape, Shape } from './shape';

function circle(raDeg: number, decDeg: number, sigmaDeg: number): CircleShape {
	const centre = { raDeg, decDeg };
	return { kind: 'circle', centre, radiusDeg: radiusFromSigma(sigmaDeg, 0.9), containment: 0.9 };
}

/** The same density by a shape that has no closed form, so that the mesh does the work. */
function asEllipse({ centre, radiusDeg, containment }: CircleShape): Shape {
	return {
		kind: 'ellipse',
		centre,
		semiMajorDeg: radiusDeg,
		semiMinorDeg: radiusDeg,
		positionAngleDeg: 0,
		containment
	};
}

describe('Bayes factor of position', () => {
	it.each(methods.bayes)('is $factor at σ $sigmasDeg, $separationDeg° apart', (row) => {
		const [first = NaN, second = NaN] = row.sigmasDeg;
		const parts = [circle(10, 0, first), circle(10 + row.separationDeg, 0, second)];
		// The printed values have six digits.
		expect(Math.exp(logBayesFactor(parts)) / row.factor).toBeCloseTo(1, 4);
	});

	it('keeps its digits at arcseconds', () => {
		const row = methods.bayes_arcsecond;
		const [first = NaN, second = NaN] = row.sigmasArcsec;
		const parts = [
			circle(0, 0, first / 3600),
			circle(0, row.separationArcsec / 3600, second / 3600)
		];
		expect(Math.exp(logBayesFactor(parts)) / row.factor).toBeCloseTo(1, 8);
	});

	it('neither overflows nor underflows', () => {
		const far = logBayesFactor([circle(0, 0, 1 / 3600), circle(180, 0, 1 / 3600)]);
		expect(far).toBeLessThan(-1e10);
		expect(Number.isFinite(far)).toBe(true);
		const many = Array.from({ length: 6 }, () => circle(10, 10, 0.1 / 3600));
		expect(logBayesFactor(many)).toBeGreaterThan(100);
		expect(Number.isFinite(logBayesFactor(many))).toBe(true);
	});

	it('is the same on the mesh, to 1 %', () => {
		const pairs = [
			[circle(83, -8, 2), circle(85, -6, 1)],
			[circle(0, 89, 0.5), circle(180, 89, 1)],
			[circle(359.9, 0, 3), circle(0.2, 0, 5 / 3600)]
		] as const;
		for (const [a, b] of pairs) {
			const exact = logBayesFactor([a, b]);
			expect(Math.abs(Math.exp(logBayesFactor([asEllipse(a), b]) - exact) - 1)).toBeLessThan(0.01);
		}
	});

	it('is 1 for a part that says nothing, and for one part alone', () => {
		const anywhere: CircleShape = { ...circle(0, 0, 1), radiusDeg: 180 };
		expect(logBayesFactor([circle(83, -8, 2), anywhere])).toBeCloseTo(0, 9);
		expect(logBayesFactor([circle(83, -8, 2)])).toBe(0);
		expect(() => logBayesFactor([])).toThrow(RangeError);
	});

	it('is nothing where hard edges keep the parts apart', () => {
		const a: Shape = { kind: 'hardCircle', centre: { raDeg: 10, decDeg: 0 }, radiusDeg: 3 };
		const b: Shape = { kind: 'hardCircle', centre: { raDeg: 20, decDeg: 0 }, radiusDeg: 3 };
		expect(logBayesFactor([a, b])).toBe(-Infinity);
	});
});

describe('whether an alert belongs to a transient', () => {
	it('is the Bayes factor of all over that of the parts', () => {
		const parts = [circle(83, -8, 2), circle(84, -8, 1)];
		const shape = circle(83.5, -8, 0.03);
		expect(logBayesOfJoining(parts, shape)).toBeCloseTo(
			logBayesFactor([...parts, shape]) - logBayesFactor(parts),
			9
		);
	});

	it('has an answer for parts that contradict each other', () => {
		const apart = [circle(83, -8, 1), circle(120, 30, 1)];
		const alone = logBayesFactor([circle(83, -8, 1), circle(83.1, -8, 0.1)]);
		expect(logBayesOfJoining(apart, circle(83.1, -8, 0.1))).toBeCloseTo(alone + Math.log(0.5), 6);
		expect(logBayesOfJoining(apart, circle(200, 0, 0.1))).toBeLessThan(-1000);
		const hard = apart.map(({ centre }): Shape => ({ kind: 'hardCircle', centre, radiusDeg: 1 }));
		expect(logBayesOfJoining(hard, { ...hard[0], centre: { raDeg: 0, decDeg: 0 } } as Shape)).toBe(
			-Infinity
		);
	});

	it('weighs chance by rate and window', () => {
		const rate = { alertsPerYear: 365.25, windowS: 864 };
		expect(expectedChanceAlerts(rate)).toBeCloseTo(0.01, 12);
		expect(priorOdds(rate)).toBeCloseTo(100, 9);
		expect(logPriorOdds(rate, 0.5)).toBeCloseTo(Math.log(50), 9);
		expect(agreementOdds(Math.log(3), 0.5)).toBeCloseTo(1.5, 12);
		expect(agreementOdds(-Infinity, 100)).toBe(0);
		expect(() => priorOdds({ alertsPerYear: 0, windowS: 1 })).toThrow(/alertsPerYear is 0/);
		expect(() => priorOdds({ alertsPerYear: 1, windowS: -1 })).toThrow(/windowS is -1/);
	});

	it('joins above 10 : 1, starts below 1 : 10, and asks a person between', () => {
		expect([10.1, 10, 1, 0.1, 0.099, 0].map(agreementVerdict)).toEqual([
			'join',
			'provisional',
			'provisional',
			'provisional',
			'start',
			'start'
		]);
		expect(JOIN_LOG_ODDS).toBeCloseTo(-START_LOG_ODDS, 12);
	});
});
