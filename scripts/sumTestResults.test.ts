import { describe, expect, it } from 'vitest';
import { countsOf, hasFailed, sumSteps } from './sumTestResults';

describe('the sum over the test steps', () => {
	const unit = { passed: 40, failed: 0, skipped: 0 };

	it('adds what the runners counted', () => {
		const steps = [
			{ name: 'lint', exitCode: 0, counts: null },
			{ name: 'unit tests', exitCode: 0, counts: unit },
			{ name: 'browser tests', exitCode: 1, counts: { passed: 3, failed: 2, skipped: 1 } }
		];
		expect(sumSteps(steps)).toEqual({ passed: 43, failed: 2, skipped: 1 });
	});

	it('counts a step that failed without a failed test as one failure', () => {
		expect(sumSteps([{ name: 'lint', exitCode: 2, counts: null }]).failed).toBe(1);
		expect(sumSteps([{ name: 'unit tests', exitCode: 1, counts: unit }]).failed).toBe(1);
	});

	it('takes a run of no test for a failure', () => {
		const counts = { passed: 0, failed: 0, skipped: 9 };
		expect(hasFailed({ name: 'unit tests', exitCode: 0, counts })).toBe(true);
	});

	it('reads both kinds of report, and a test that needed a second try as failed', () => {
		expect(countsOf({ numPassedTests: 5, numFailedTests: 1, numPendingTests: 2 })).toEqual({
			passed: 5,
			failed: 1,
			skipped: 2
		});
		const stats = { expected: 4, unexpected: 1, flaky: 1, skipped: 0 };
		expect(countsOf({ stats })).toEqual({ passed: 4, failed: 2, skipped: 0 });
	});
});
