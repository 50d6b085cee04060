import type { ResponseStep } from '../../domain/response';
import type { Observation } from '../../sky/response/survivalCurve';
import type { Milestones } from './responseStory';

/** One step of one transient: seconds taken, or waited so far. */
export type StepTime = Observation & {
	/** Waiting now, or when the transient was closed; false for one that was parked or dropped. */
	stillOpen: boolean;
};

type Milestone = Exclude<keyof Milestones, 'closed' | 'setAside'>;

const ENDS: Record<ResponseStep, { from: Milestone; to: Milestone; afterDecision: boolean }> = {
	triggerToReceived: { from: 't0', to: 'received', afterDecision: false },
	receivedToTaken: { from: 'received', to: 'taken', afterDecision: false },
	takenToDecision: { from: 'taken', to: 'decided', afterDecision: false },
	decisionToClaim: { from: 'chased', to: 'claimed', afterDecision: true },
	claimToExposure: { from: 'claimed', to: 'exposed', afterDecision: true },
	exposureToReport: { from: 'exposed', to: 'reported', afterDecision: true },
	reportToCircular: { from: 'reported', to: 'circular', afterDecision: true }
};

/**
 * How long one step took, or null when it never began. A step whose end came before its start took no
 * time (an observer who claims before the decision is taken waited for nothing). A wait ends unanswered
 * now, when the transient is closed or retracted and, for what follows a decision, when it is set aside.
 */
export function stepTime(
	milestones: Milestones,
	step: ResponseStep,
	nowMs: number
): StepTime | null {
	const { from, to, afterDecision } = ENDS[step];
	return waitBetween(milestones, from, to, afterDecision, nowMs);
}

/** From T0 to the first exposure: the wait that the curve shows. */
export function waitForExposure(milestones: Milestones, nowMs: number): StepTime {
	return waitBetween(milestones, 't0', 'exposed', true, nowMs)!;
}

function waitBetween(
	milestones: Milestones,
	from: Milestone,
	to: Milestone,
	afterDecision: boolean,
	nowMs: number
): StepTime | null {
	const startMs = milestones[from];
	if (startMs === null) return null;
	const openEndMs = Math.min(nowMs, milestones.closed ?? Infinity);
	const setAsideMs = (afterDecision ? milestones.setAside : null) ?? Infinity;
	const limitMs = Math.min(openEndMs, setAsideMs);
	const endMs = milestones[to];
	const ended = endMs !== null && endMs <= limitMs;
	// Set aside before it began, as a claim on what has been dropped: nobody waits.
	if (!ended && setAsideMs <= startMs) return null;
	const atMs = ended ? endMs : limitMs;
	return {
		time: Math.max(0, atMs - startMs) / 1000,
		ended,
		stillOpen: !ended && openEndMs <= setAsideMs
	};
}
