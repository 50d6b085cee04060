/** A repeatable source of numbers in [0, 1): the demo is the same for the same clock. */
export type DemoRandom = {
	next: () => number;
	/** Standard normal deviate. */
	normal: () => number;
	between: (low: number, high: number) => number;
	pick: <T>(items: readonly T[]) => T;
	shuffled: <T>(items: readonly T[]) => T[];
};

/** A 32-bit generator (mulberry32, public domain) started from `seed`. */
export function demoRandom(seed: number): DemoRandom {
	let state = seed >>> 0;
	const next = () => {
		state = (state + 0x6d2b79f5) >>> 0;
		let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
		mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
	};
	return {
		next,
		normal: () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
		between: (low, high) => low + (high - low) * next(),
		pick: (items) => {
			if (items.length === 0) throw new RangeError('items is empty; there is nothing to pick');
			return items[Math.floor(next() * items.length)]!;
		},
		shuffled: (items) => {
			const mixed = [...items];
			for (let last = mixed.length - 1; last > 0; last--) {
				const other = Math.floor(next() * (last + 1));
				[mixed[last], mixed[other]] = [mixed[other]!, mixed[last]!];
			}
			return mixed;
		}
	};
}

/** Standard normal quantile, |error| < 4.5e-4 (Abramowitz & Stegun 1964, 26.2.23; from memory). */
function normalQuantile(share: number): number {
	const tail = Math.min(share, 1 - share);
	const t = Math.sqrt(-2 * Math.log(tail));
	const z =
		t -
		(2.515517 + t * (0.802853 + t * 0.010328)) /
			(1 + t * (1.432788 + t * (0.189269 + t * 0.001308)));
	return share < 0.5 ? -z : z;
}

const NORMAL_QUANTILE_90 = 1.2816;

/** How much of a wait is its own luck, next to how hard the whole case is. */
const OWN_LUCK = 0.45;

/**
 * Log-normal waiting times in seconds, one for each case, evenly spread over their distribution, so that
 * a short history has the median and the 90 % point asked for. `hardness` holds a standard normal deviate
 * for each case: the hard ones take long at every step.
 */
export function lognormalDelays(
	random: DemoRandom,
	hardness: readonly number[],
	{ medianS, ninetyPercentS }: { medianS: number; ninetyPercentS: number }
): number[] {
	const sigma = Math.log(ninetyPercentS / medianS) / NORMAL_QUANTILE_90;
	const order = hardness
		.map((hard, index) => ({ index, rank: hard + OWN_LUCK * random.normal() }))
		.sort((a, b) => a.rank - b.rank);
	const delays = new Array<number>(hardness.length);
	order.forEach(({ index }, place) => {
		delays[index] = medianS * Math.exp(sigma * normalQuantile((place + 0.5) / order.length));
	});
	return delays;
}
