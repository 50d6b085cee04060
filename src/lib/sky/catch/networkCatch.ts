import type { RegionSample } from '../tiling/regionSample';
import type { PlanStep } from './tilePlan';

/** Below this gain another telescope adds nothing that a person would see. */
const LEAST_GAIN = 1e-6;

/** One telescope's plan as a chance of detection at each of the region's points. */
export type PointChances = { telescopeId: string; chances: Float64Array };

/** Chance of detection at each point if the source is there: the share of the point's sky inside tiles × chance. */
export function pointChances(
	telescopeId: string,
	plan: readonly PlanStep[],
	region: RegionSample
): PointChances {
	const chances = new Float64Array(region.count);
	for (const { tile, detectChance } of plan) {
		for (let k = 0; k < tile.members.length; k += 1) {
			const point = tile.members[k]!;
			const weight = region.probability[point]!;
			if (weight > 0) chances[point] = chances[point]! + (tile.parts[k]! / weight) * detectChance;
		}
	}
	return { telescopeId, chances };
}

/**
 * Catch of the network and the order in which telescopes add most to it: greedy maximum coverage, sky seen
 * twice counted once at its better chance (within 1 − 1/e of the best choice at every length: Nemhauser,
 * Wolsey & Fisher 1978, Mathematical Programming 14, 265).
 */
export function networkCatch(
	telescopes: readonly PointChances[],
	region: RegionSample
): { catch: number; order: { telescopeId: string; gain: number }[] } {
	const best = new Float64Array(region.count);
	const order: { telescopeId: string; gain: number }[] = [];
	// Gains only shrink as others are picked, so an old gain is an upper bound (lazy greedy).
	const queue = telescopes.map((telescope) => ({
		telescope,
		gain: gainOver(telescope.chances, best, region),
		round: 0
	}));
	let total = 0;
	while (queue.length > 0) {
		queue.sort(
			(a, b) => b.gain - a.gain || (a.telescope.telescopeId < b.telescope.telescopeId ? -1 : 1)
		);
		const first = queue[0]!;
		if (first.gain < LEAST_GAIN) break;
		if (first.round < order.length) {
			first.gain = gainOver(first.telescope.chances, best, region);
			first.round = order.length;
			continue;
		}
		queue.shift();
		order.push({ telescopeId: first.telescope.telescopeId, gain: first.gain });
		total += first.gain;
		const { chances } = first.telescope;
		for (let i = 0; i < best.length; i += 1) if (chances[i]! > best[i]!) best[i] = chances[i]!;
	}
	return { catch: total, order };
}

function gainOver(chances: Float64Array, best: Float64Array, region: RegionSample): number {
	let gain = 0;
	for (let i = 0; i < best.length; i += 1) {
		const more = chances[i]! - best[i]!;
		if (more > 0) gain += more * region.probability[i]!;
	}
	return gain;
}
