/**
 * When do parts contradict each other so that their product would be a confident wrong answer?
 * Judged by how far the best common position falls short of every part's own best: half a χ², exactly
 * so for Fisher densities, on 2(n − 1) degrees of freedom.
 */

/** Chance, for one source, of parts lying this far apart or further, below which they do not overlap. */
const NO_OVERLAP_CHANCE = 1e-6;
/** With odds already against one source, a chance of this much is enough. */
const UNLIKELY_CHANCE = 0.01;
const LOG_ODDS_AGAINST = -Math.log(10);

/** Whether `partCount` parts contradict each other, from half their χ² and the ln of their Bayes factor. */
export function contradicts(partCount: number, halfChi2: number, logBayes: number): boolean {
	if (partCount < 2) return false;
	const chance = chanceOfSpread(partCount, halfChi2);
	return chance < NO_OVERLAP_CHANCE || (chance < UNLIKELY_CHANCE && logBayes < LOG_ODDS_AGAINST);
}

/** Survival function of χ² on 2(n − 1) degrees of freedom: e^(−x) Σ xᵏ/k!, x = χ²/2 (Abramowitz & Stegun 1964, 26.4.5). */
export function chanceOfSpread(partCount: number, halfChi2: number): number {
	if (halfChi2 === Infinity) return 0;
	let term = Math.exp(-halfChi2);
	let sum = term;
	for (let k = 1; k < partCount - 1; k++) {
		term *= halfChi2 / k;
		sum += term;
	}
	return sum;
}

/** Indices 0 … count − 1 in groups linked by `linked`, each group and the list in ascending order. */
export function linkedGroups(count: number, linked: (i: number, j: number) => boolean): number[][] {
	const groupOf = Array.from({ length: count }, (_, i) => i);
	for (let i = 0; i < count; i++) {
		for (let j = i + 1; j < count; j++) {
			const from = groupOf[j] ?? j;
			const to = groupOf[i] ?? i;
			if (from === to || !linked(i, j)) continue;
			for (let k = 0; k < count; k++) if (groupOf[k] === from) groupOf[k] = to;
		}
	}
	const groups = new Map<number, number[]>();
	groupOf.forEach((group, i) => groups.set(group, [...(groups.get(group) ?? []), i]));
	return [...groups.values()];
}
