import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readReferenceJson } from '../../../../tests/unit/readReference';
import { chiSquareTail, logRankTest } from './logRank';
import { survivalCurve, survivalPercentile, type Observation } from './survivalCurve';

type Sample = {
	name: string;
	time: number[];
	status: number[];
	event_times: number[];
	n_risk: number[];
	n_event: number[];
	survival: number[];
	std_err_greenwood: (number | null)[];
	ci95_loglog_lower: (number | null)[];
	ci95_loglog_upper: (number | null)[];
	median: number | null;
	median_ci95_loglog: [number | null, number | null];
	quartiles: [number | null, number | null, number | null];
};
type Comparison = {
	name: string;
	groups: [string, string];
	observed: number[];
	expected: number[];
	chisq: number;
	df: number;
	p: number;
};

const reference = readReferenceJson<{ samples: Sample[]; logrank: Comparison[] }>('survival.json');
const TOLERANCE = 1e-6;

const observations = (sample: Sample): Observation[] =>
	sample.time.map((time, i) => ({ time, ended: sample.status[i] === 1 }));

function expectClose(actual: number | null | undefined, expected: number | null | undefined): void {
	if (expected === null || expected === undefined) expect(actual).toBeNull();
	else expect(Math.abs((actual ?? Number.NaN) - expected)).toBeLessThan(TOLERANCE);
}

describe('Kaplan-Meier against R survival 3.5-3', () => {
	it('reads all four samples and both comparisons', () => {
		expect(reference.samples).toHaveLength(4);
		expect(reference.logrank).toHaveLength(2);
	});

	it.each(reference.samples.map((sample) => [sample.name, sample] as const))(
		'gives survival, error and limits at every time of %s',
		(_, sample) => {
			const curve = survivalCurve(observations(sample));
			expect(curve.steps.map(({ time }) => time)).toEqual(sample.event_times);
			expect(curve.steps.map(({ atRisk }) => atRisk)).toEqual(sample.n_risk);
			expect(curve.steps.map(({ ended }) => ended)).toEqual(sample.n_event);
			curve.steps.forEach((step, i) => {
				expectClose(step.survival, sample.survival[i]);
				expectClose(step.standardError, sample.std_err_greenwood[i]);
				expectClose(step.lower, sample.ci95_loglog_lower[i]);
				expectClose(step.upper, sample.ci95_loglog_upper[i]);
			});
		}
	);

	it.each(reference.samples.map((sample) => [sample.name, sample] as const))(
		'gives quartiles, median and its interval where reached: %s',
		(_, sample) => {
			const curve = survivalCurve(observations(sample));
			expectClose(curve.median, sample.median);
			expectClose(curve.medianInterval.lower, sample.median_ci95_loglog[0]);
			expectClose(curve.medianInterval.upper, sample.median_ci95_loglog[1]);
			[0.25, 0.5, 0.75].forEach((share, i) =>
				expectClose(survivalPercentile(curve, share), sample.quartiles[i])
			);
		}
	);

	it.each(reference.logrank.map((comparison) => [comparison.name, comparison] as const))(
		'gives the log-rank test of %s',
		(_, comparison) => {
			const groups = comparison.groups.map((name) =>
				observations(reference.samples.find((sample) => sample.name === name)!)
			);
			const test = logRankTest(groups);
			test.observed.forEach((value, i) => expectClose(value, comparison.observed[i]));
			test.expected.forEach((value, i) => expectClose(value, comparison.expected[i]));
			expectClose(test.chiSquare, comparison.chisq);
			expect(test.degreesOfFreedom).toBe(comparison.df);
			expectClose(test.pValue, comparison.p);
		}
	);
});

describe('response times', () => {
	it('reports a percentile only where the curve reaches it', () => {
		const curve = survivalCurve([
			{ time: 5, ended: true },
			{ time: 9, ended: false },
			{ time: 9, ended: false }
		]);
		expect(curve.median).toBeNull();
		expect(survivalPercentile(curve, 0.9)).toBeNull();
		expect(survivalPercentile(curve, 0.3)).toBe(5);
	});

	it('is the plain share when nothing is censored, whatever the order', () => {
		fc.assert(
			fc.property(
				fc.array(fc.integer({ min: 0, max: 30 }), { minLength: 1, maxLength: 60 }),
				(times) => {
					const curve = survivalCurve(times.map((time) => ({ time, ended: true })));
					for (const step of curve.steps) {
						const open = times.filter((time) => time > step.time).length / times.length;
						expect(step.survival).toBeCloseTo(open, 12);
					}
					expect(survivalCurve(times.reverse().map((time) => ({ time, ended: true })))).toEqual(
						curve
					);
				}
			)
		);
	});

	it('finds no difference between equal groups and refuses empty ones', () => {
		const group = [1, 2, 3, 4].map((time) => ({ time, ended: true }));
		const test = logRankTest([group, group, group]);
		expect(test.chiSquare).toBeCloseTo(0, 12);
		expect(test.degreesOfFreedom).toBe(2);
		expect(test.pValue).toBeCloseTo(1, 6);
		expect(() => logRankTest([group, []])).toThrow(RangeError);
		expect(() => survivalCurve([{ time: -1, ended: true }])).toThrow(/observations\[0\]/);
		expect(survivalCurve([])).toMatchObject({ count: 0, steps: [], median: null });
	});

	it('gives the tail of chi-square from its tables', () => {
		// 5 % points of the distribution (tables, from memory).
		const table = { 1: 3.8414588, 2: 5.9914645, 3: 7.8147279, 4: 9.487729, 5: 11.0704977 };
		for (const [df, x] of Object.entries(table)) {
			expect(chiSquareTail(x, Number(df))).toBeCloseTo(0.05, 7);
		}
	});
});
