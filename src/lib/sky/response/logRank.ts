import type { Observation } from './survivalCurve';

export type LogRank = {
	/** Ended and expected to have ended if the groups were alike, by group. */
	observed: number[];
	expected: number[];
	chiSquare: number;
	degreesOfFreedom: number;
	/** Chance of so great a difference between groups that are alike. */
	pValue: number;
};

/**
 * Log-rank test that two or more groups take equally long (Mantel 1966; Peto & Peto 1972), hypergeometric
 * variance. Groups without observations are refused; with nothing ended χ² is 0 and p is 1. Agrees with R survival.
 */
export function logRankTest(groups: readonly (readonly Observation[])[]): LogRank {
	if (groups.length < 2 || groups.some((group) => group.length === 0)) {
		throw new RangeError(
			`groups has sizes ${groups.map((group) => group.length).join(', ')}; it needs at least two, none empty`
		);
	}
	const count = groups.length;
	const times = [
		...new Set(
			groups.flatMap((group) => group.filter(({ ended }) => ended).map(({ time }) => time))
		)
	].sort((a, b) => a - b);
	const observed = new Array<number>(count).fill(0);
	const expected = new Array<number>(count).fill(0);
	const variance = groups.map(() => new Array<number>(count).fill(0));
	for (const time of times) {
		const atRisk = groups.map((group) => group.filter((one) => one.time >= time).length);
		const ended = groups.map(
			(group) => group.filter((one) => one.ended && one.time === time).length
		);
		const allAtRisk = atRisk.reduce((sum, n) => sum + n, 0);
		const allEnded = ended.reduce((sum, n) => sum + n, 0);
		const spread = allAtRisk > 1 ? (allEnded * (allAtRisk - allEnded)) / (allAtRisk - 1) : 0;
		for (let i = 0; i < count; i += 1) {
			const share = atRisk[i]! / allAtRisk;
			observed[i]! += ended[i]!;
			expected[i]! += allEnded * share;
			for (let j = 0; j < count; j += 1) {
				variance[i]![j]! += spread * share * ((i === j ? 1 : 0) - atRisk[j]! / allAtRisk);
			}
		}
	}
	const degreesOfFreedom = count - 1;
	const excess = observed.map((value, i) => value - expected[i]!).slice(0, degreesOfFreedom);
	const solved = solve(
		variance.slice(0, degreesOfFreedom).map((row) => row.slice(0, degreesOfFreedom)),
		excess
	);
	const chiSquare = Math.max(
		0,
		solved.reduce((sum, value, i) => sum + value * excess[i]!, 0)
	);
	return {
		observed,
		expected,
		chiSquare,
		degreesOfFreedom,
		pValue: chiSquareTail(chiSquare, degreesOfFreedom)
	};
}

/** Gaussian elimination with pivoting; a direction without variance contributes nothing. */
function solve(matrix: number[][], right: number[]): number[] {
	const size = right.length;
	const rows = matrix.map((row, i) => [...row, right[i]!]);
	for (let column = 0; column < size; column += 1) {
		let pivot = column;
		for (let i = column + 1; i < size; i += 1) {
			if (Math.abs(rows[i]![column]!) > Math.abs(rows[pivot]![column]!)) pivot = i;
		}
		[rows[column], rows[pivot]] = [rows[pivot]!, rows[column]!];
		const lead = rows[column]![column]!;
		if (Math.abs(lead) < 1e-12) {
			rows[column]!.fill(0);
			continue;
		}
		for (let i = 0; i < size; i += 1) {
			if (i === column) continue;
			const factor = rows[i]![column]! / lead;
			for (let j = column; j <= size; j += 1) rows[i]![j]! -= factor * rows[column]![j]!;
		}
	}
	return rows.map((row, i) => (row[i] === 0 ? 0 : row[size]! / row[i]!));
}

/**
 * Upper tail of the χ² distribution by the recurrence Q(k + 2) = Q(k) + (x/2)^(k/2) e^(−x/2) / Γ(k/2 + 1), from
 * Q(1) = erfc(√(x/2)) and Q(2) = e^(−x/2) (Abramowitz & Stegun 1964, eq. 26.4.8; from memory).
 */
export function chiSquareTail(x: number, degreesOfFreedom: number): number {
	if (x <= 0) return 1;
	const half = x / 2;
	const odd = degreesOfFreedom % 2 === 1;
	let tail = odd ? erfc(Math.sqrt(half)) : Math.exp(-half);
	let term = odd ? 2 * Math.sqrt(half / Math.PI) * Math.exp(-half) : half * Math.exp(-half);
	for (let k = odd ? 1 : 2; k + 2 <= degreesOfFreedom; k += 2) {
		tail += term;
		term *= half / (k / 2 + 1);
	}
	return tail;
}

/** Complementary error function for x ≥ 0, to 1e-14: series below 2, continued fraction (Lentz) above. */
function erfc(x: number): number {
	if (x < 2) {
		let term = x;
		let sum = x;
		for (let n = 1; Math.abs(term) > 1e-17 * sum; n += 1) {
			term *= (-x * x) / n;
			sum += term / (2 * n + 1);
		}
		return 1 - (2 / Math.sqrt(Math.PI)) * sum;
	}
	let fraction = 0;
	for (let n = 80; n > 0; n -= 1) fraction = n / 2 / (x + fraction);
	return Math.exp(-x * x) / (Math.sqrt(Math.PI) * (x + fraction));
}
