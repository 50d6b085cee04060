import fc from 'fast-check';
import type { Equatorial } from '../angle';

/** Positions all over the sky for property tests: both poles and RA 0 come up often. */
export const arbitraryPosition: fc.Arbitrary<Equatorial> = fc.record({
	raDeg: fc.oneof(
		fc.constantFrom(0, 1e-9, 45, 90, 180, 270, 359.999999),
		fc.double({ min: 0, max: 360, maxExcluded: true, noNaN: true })
	),
	decDeg: fc.oneof(
		fc.constantFrom(-90, -89.9999, -41.81, 0, 41.81, 89.9999, 90),
		fc.double({ min: -90, max: 90, noNaN: true })
	)
});

/** A generator of even draws in [0, 1) from a seed (mulberry32), for tests that must repeat exactly. */
export function seededDraws(seed: number): () => number {
	let state = seed >>> 0;
	return () => {
		state = (state + 0x6d2b79f5) >>> 0;
		let mixed = Math.imul(state ^ (state >>> 15), state | 1);
		mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
	};
}
