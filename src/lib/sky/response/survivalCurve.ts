/** One step's time so far, in any unit; `ended` false means that it is still open (censored). */
export type Observation = { time: number; ended: boolean };

/** The curve just after a time at which steps ended. */
export type SurvivalStep = {
	time: number;
	/** Still open just before this time. */
	atRisk: number;
	ended: number;
	/** Kaplan–Meier estimate of the share still open after this time. */
	survival: number;
	/** Greenwood standard error of `survival`; null where the curve reaches 0. */
	standardError: number | null;
	/** 95 % limits on the log–log scale; null where the curve reaches 0. */
	lower: number | null;
	upper: number | null;
};

export type SurvivalCurve = {
	count: number;
	ended: number;
	/** Distinct times at which something ended, in order. */
	steps: SurvivalStep[];
	/** Null where the curve does not come down to one half. */
	median: number | null;
	/** 95 % interval of the median (where the limits cross one half); an end is null where not reached. */
	medianInterval: { lower: number | null; upper: number | null };
};

/** 97.5 % point of the standard normal distribution. */
const Z_975 = 1.959963984540054;
/** Rounding must not keep a curve of, say, 6/12 from counting as one half. */
const ROUNDING = 1e-9;

/**
 * How long a step takes when some are not finished: Kaplan–Meier estimate (Kaplan & Meier 1958, JASA 53, 457)
 * with Greenwood's variance and log–log limits. Ties: endings come before censorings of the same time.
 * Agrees with R survival 3.5-3 to 1e-6. No observations give an empty curve.
 */
export function survivalCurve(observations: readonly Observation[]): SurvivalCurve {
	observations.forEach(({ time }, i) => {
		if (!(time >= 0 && Number.isFinite(time))) {
			throw new RangeError(`observations[${i}].time is ${time}; it must be finite and 0 or above`);
		}
	});
	const sorted = [...observations].sort((a, b) => a.time - b.time);
	const steps: SurvivalStep[] = [];
	let survival = 1;
	let greenwood = 0;
	for (let i = 0; i < sorted.length;) {
		const { time } = sorted[i]!;
		const atRisk = sorted.length - i;
		let ended = 0;
		for (; i < sorted.length && sorted[i]!.time === time; i += 1) if (sorted[i]!.ended) ended += 1;
		if (ended === 0) continue;
		survival *= (atRisk - ended) / atRisk;
		greenwood += ended / (atRisk * (atRisk - ended));
		steps.push({ time, atRisk, ended, survival, ...limits(survival, greenwood) });
	}
	return {
		count: sorted.length,
		ended: steps.reduce((sum, step) => sum + step.ended, 0),
		steps,
		median: timeReached(steps, 0.5, 'survival'),
		medianInterval: {
			lower: timeReached(steps, 0.5, 'lower'),
			upper: timeReached(steps, 0.5, 'upper')
		}
	};
}

/**
 * Time by which `share` (0 to 1, for instance 0.9) of the steps have ended; null where the curve does not come
 * down that far. Halfway along a flat part that lies exactly on the share, as R does.
 */
export function survivalPercentile(curve: SurvivalCurve, share: number): number | null {
	if (!(share > 0 && share < 1)) {
		throw new RangeError(`share is ${share}; it must be above 0 and below 1`);
	}
	return timeReached(curve.steps, 1 - share, 'survival');
}

function limits(
	survival: number,
	greenwood: number
): Pick<SurvivalStep, 'standardError' | 'lower' | 'upper'> {
	if (survival <= 0) return { standardError: null, lower: null, upper: null };
	const spread = (Z_975 * Math.sqrt(greenwood)) / Math.abs(Math.log(survival));
	return {
		standardError: survival * Math.sqrt(greenwood),
		lower: Math.pow(survival, Math.exp(spread)),
		upper: Math.pow(survival, Math.exp(-spread))
	};
}

/** First time at which a curve of the steps is at or below a level; the middle of a flat part exactly on it. */
function timeReached(
	steps: readonly SurvivalStep[],
	level: number,
	curve: 'survival' | 'lower' | 'upper'
): number | null {
	const at = steps.findIndex((step) => {
		const value = step[curve];
		// The limits are not known where the curve reaches 0; only the curve itself counts there.
		return value !== null && value <= level + ROUNDING;
	});
	const step = steps[at];
	if (!step) return null;
	const next = steps[at + 1];
	const onLevel = Math.abs((step[curve] ?? Number.NaN) - level) <= ROUNDING;
	return onLevel && next ? (step.time + next.time) / 2 : step.time;
}
