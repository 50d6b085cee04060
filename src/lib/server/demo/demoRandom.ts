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

/**
 * `count` log-normal waiting times in seconds, in random order, evenly spread over their distribution,
 * so that a short history has the median and the 90 % point asked for.
 */
export function lognormalDelays(
	random: DemoRandom,
	count: number,
	{ medianS, ninetyPercentS }: { medianS: number; ninetyPercentS: number }
): number[] {
	const sigma = Math.log(ninetyPercentS / medianS) / NORMAL_QUANTILE_90;
	const delays = Array.from(
		{ length: count },
		(_, index) => medianS * Math.exp(sigma * normalQuantile((index + 0.5) / count))
	);
	return random.shuffled(delays);
}
