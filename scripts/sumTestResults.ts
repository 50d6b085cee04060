import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

/** What one step of the test command came to; a step without tests of its own has none counted. */
export type StepResult = { name: string; exitCode: number; counts: TestCounts | null };
export type TestCounts = { passed: number; failed: number; skipped: number };

/** Reads the steps' exit codes (`NAME.exit`) and, where a runner wrote one, its JSON report. */
export function readSteps(directory: string): StepResult[] {
	return readdirSync(directory)
		.filter((file) => file.endsWith('.exit'))
		.map((file) => {
			const name = file.slice(0, -'.exit'.length);
			const report = join(directory, `${name}.json`);
			return {
				name,
				exitCode: Number(readFileSync(join(directory, file), 'utf8')),
				counts: existsSync(report) ? countsOf(JSON.parse(readFileSync(report, 'utf8'))) : null
			};
		});
}

/**
 * Passed and failed over all steps. A step that failed without a failed test of its own (lint, a file
 * that doesn't load) counts as one failure, and so does a runner that ran no test.
 */
export function sumSteps(steps: readonly StepResult[]): TestCounts {
	const total: TestCounts = { passed: 0, failed: 0, skipped: 0 };
	for (const step of steps) {
		const counts = step.counts ?? { passed: 0, failed: 0, skipped: 0 };
		total.passed += counts.passed;
		total.skipped += counts.skipped;
		total.failed += Math.max(counts.failed, hasFailed(step) ? 1 : 0);
	}
	return total;
}

/** Whether a step counts as failed: by its exit code, a failed test, or a run without any test. */
export function hasFailed({ exitCode, counts }: StepResult): boolean {
	const ranNothing = counts !== null && counts.passed + counts.failed === 0;
	return exitCode !== 0 || ranNothing || (counts?.failed ?? 0) > 0;
}

/** Counts in a report of Vitest's or Playwright's JSON reporter. */
export function countsOf(report: unknown): TestCounts {
	const numbers = report as Record<string, number | undefined> & {
		stats?: Record<string, number | undefined>;
	};
	if (numbers.stats) {
		const { expected = 0, unexpected = 0, flaky = 0, skipped = 0 } = numbers.stats;
		// A test that passed only when tried again is not one that passes.
		return { passed: expected, failed: unexpected + flaky, skipped };
	}
	return {
		passed: numbers.numPassedTests ?? 0,
		failed: numbers.numFailedTests ?? 0,
		skipped: (numbers.numPendingTests ?? 0) + (numbers.numTodoTests ?? 0)
	};
}

function describeStep(step: StepResult): string {
	const verdict = hasFailed(step) ? 'FAILED' : 'passed';
	const { counts } = step;
	const detail = counts ? `${counts.passed} passed, ${counts.failed} failed` : '';
	return `  ${step.name.padEnd(16)} ${verdict}  ${detail}`.trimEnd();
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
	const steps = readSteps(process.argv[2] ?? '.');
	const { passed, failed, skipped } = sumSteps(steps);
	console.log(steps.map(describeStep).join('\n'));
	console.log(`\n${passed} passed, ${failed} failed${skipped ? `, ${skipped} skipped` : ''}`);
	process.exitCode = failed > 0 || passed === 0 ? 1 : 0;
}
