import {
	RESPONSE_STEPS,
	type ResponseDifference,
	type ResponseRow,
	type ResponseStep,
	type WaitingCurve
} from '../../domain/response';
import { logRankTest } from '../../sky/response/logRank';
import { survivalCurve, survivalPercentile } from '../../sky/response/survivalCurve';
import type { Milestones } from './responseStory';
import { stepTime, waitForExposure, type StepTime } from './stepTimes';

export type ResponseGroup = { label: string | null; milestones: Milestones[] };

/** One row per group and step that began at least once; all steps when there is one group only. */
export function responseRows(
	groups: ResponseGroup[],
	steps: readonly ResponseStep[],
	nowMs: number
): ResponseRow[] {
	return groups.flatMap(({ label, milestones }) =>
		steps.flatMap((step) => {
			const times = timesOf(milestones, step, nowMs);
			return times.length === 0 && label !== null ? [] : [row(label, step, times)];
		})
	);
}

/** Log-rank tests between the groups, step by step, where at least two groups have begun it. */
export function responseDifferences(
	groups: ResponseGroup[],
	steps: readonly ResponseStep[],
	nowMs: number
): ResponseDifference[] {
	return steps.flatMap((step) => {
		const samples = groups
			.map(({ milestones }) => timesOf(milestones, step, nowMs))
			.filter((times) => times.length > 0);
		if (samples.length < 2) return [];
		const { chiSquare, degreesOfFreedom, pValue } = logRankTest(samples);
		return [{ step, chiSquare, degreesOfFreedom, pValue }];
	});
}

/** Share of transients still waiting for a first exposure. */
export function waitingCurve(milestones: Milestones[], nowMs: number): WaitingCurve {
	const waits = milestones.map((one) => waitForExposure(one, nowMs));
	const curve = survivalCurve(waits);
	const shareAt = (timeS: number) =>
		curve.steps.findLast(({ time }) => time <= timeS)?.survival ?? 1;
	return {
		count: curve.count,
		ended: curve.ended,
		steps: curve.steps.map(({ time, survival, lower, upper }) => ({
			timeS: time,
			share: survival,
			lower,
			upper
		})),
		censored: waits
			.filter(({ ended }) => !ended)
			.map(({ time }) => ({ timeS: time, share: shareAt(time) }))
			.sort((a, b) => a.timeS - b.timeS),
		medianS: curve.median,
		medianLowerS: curve.medianInterval.lower,
		medianUpperS: curve.medianInterval.upper
	};
}

/** Steps that are one telescope's own doing. */
export const TELESCOPE_STEPS: readonly ResponseStep[] = [
	'claimToExposure',
	'exposureToReport',
	'reportToCircular'
];

export const ALL_STEPS: readonly ResponseStep[] = RESPONSE_STEPS;

function timesOf(milestones: Milestones[], step: ResponseStep, nowMs: number): StepTime[] {
	return milestones.flatMap((one) => stepTime(one, step, nowMs) ?? []);
}

function row(group: string | null, step: ResponseStep, times: StepTime[]): ResponseRow {
	const curve = survivalCurve(times);
	return {
		group,
		step,
		count: times.length,
		stillOpen: times.filter(({ stillOpen }) => stillOpen).length,
		medianS: curve.median,
		medianLowerS: curve.medianInterval.lower,
		medianUpperS: curve.medianInterval.upper,
		percentile90S: survivalPercentile(curve, 0.9)
	};
}
