import { canonicalOrder } from './canonicalOrder';
import { agreeingGroups, multiplyParts, prepareParts } from './parts';
import type { Shape } from './shape';

/** Posterior odds above which an alert joins a transient. */
export const JOIN_ODDS = 10;
/** Posterior odds below which an alert starts a transient of its own. */
export const START_ODDS = 1 / 10;
export const JOIN_LOG_ODDS = Math.log(JOIN_ODDS);
export const START_LOG_ODDS = Math.log(START_ODDS);

const YEAR_S = 365.25 * 86_400;

/** How often unrelated alerts come, and how far apart in time two alerts of one source may be. */
export type ChanceRate = { alertsPerYear: number; windowS: number };

/** What the odds mean for an alert: join the transient, join it until a person has looked, or start its own. */
export type AgreementVerdict = 'join' | 'provisional' | 'start';

/**
 * ln of the Bayes factor for one source against as many unrelated ones as there are parts (at least one),
 * from position only: (4π)^(n−1) ∫ Π pᵢ dΩ (Budavári & Szalay 2008, ApJ 679, 301, eq. 17). Circles alone by
 * the closed form, exact at arcseconds; else on the mesh, to 1 %. −Infinity where nothing overlaps.
 */
export function logBayesFactor(parts: Shape[]): number {
	if (parts.length === 0) throw new RangeError('parts is empty; it must hold at least one shape');
	if (parts.length === 1) return 0;
	return multiplyParts(prepareParts(canonicalOrder(parts))).logBayes;
}

/**
 * ln of the Bayes factor for `shape` having the source of `parts`, against a source of its own. Where the
 * parts contradict each other it may belong to any group of them that agrees, each weighted by its parts.
 * −Infinity where it overlaps none; never NaN.
 */
export function logBayesOfJoining(parts: Shape[], shape: Shape): number {
	if (parts.length === 0) throw new RangeError('parts is empty; it must hold at least one shape');
	const prepared = prepareParts(canonicalOrder(parts));
	const added = prepareParts([shape]);
	const groups = multiplyParts(prepared).agrees ? [prepared] : agreeingGroups(prepared);
	const terms = groups.map((group) => {
		const together = multiplyParts([...group, ...added]).logBayes;
		return Math.log(group.length / parts.length) + together - multiplyParts(group).logBayes;
	});
	const greatest = Math.max(...terms);
	if (greatest === -Infinity) return -Infinity;
	return greatest + Math.log(terms.reduce((sum, term) => sum + Math.exp(term - greatest), 0));
}

/** Unrelated alerts expected within the time window by chance. */
export function expectedChanceAlerts({ alertsPerYear, windowS }: ChanceRate): number {
	if (!(alertsPerYear > 0 && alertsPerYear < Infinity)) {
		throw new RangeError(`alertsPerYear is ${alertsPerYear}; it must be finite and above 0`);
	}
	if (!(windowS > 0 && windowS < Infinity)) {
		throw new RangeError(`windowS is ${windowS}; it must be finite and above 0`);
	}
	return (alertsPerYear * windowS) / YEAR_S;
}

/** Natural log of `priorOdds`. */
export function logPriorOdds(rate: ChanceRate, sharedShare = 1): number {
	return Math.log(priorOdds(rate, sharedShare));
}

/**
 * Prior odds of one source against chance: one over the expected chance alerts, times the share of sources
 * that both streams see (1 unless known; common practice, no source).
 */
export function priorOdds(rate: ChanceRate, sharedShare = 1): number {
	return sharedShare / expectedChanceAlerts(rate);
}

/** Posterior odds of one source: Bayes factor times prior odds; 0 and Infinity are possible answers. */
export function agreementOdds(logBayes: number, prior: number): number {
	return Math.exp(logBayes + Math.log(prior));
}

/** What to do at given posterior odds; the limits themselves are provisional. */
export function agreementVerdict(odds: number): AgreementVerdict {
	if (odds > JOIN_ODDS) return 'join';
	return odds < START_ODDS ? 'start' : 'provisional';
}
