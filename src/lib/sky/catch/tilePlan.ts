import type { FadeModel, PlannedTile } from '../outlook/outlook';
import type { RegionTile } from '../tiling/tilesFor';
import {
	moonAltitudeDeg,
	moonDistanceDeg,
	moonPhase,
	targetAltitudeDeg,
	type SkyTarget
} from '../visibility/siteSky';
import type { TelescopeNights } from '../visibility/targetWindows';
import type { TelescopeSpec, Window } from '../visibility/telescope';
import { limitMag } from './depth';
import { detectChance } from './fade';

/** Gains closer than this share count as equal, so that the tile that sets first goes first. */
const TIE_SHARE = 0.01;

/** A tile with its prepared place and the windows of one telescope. */
export type TileOnSky = { tile: RegionTile; target: SkyTarget; windows: Window[] };

/** A planned tile and the region tile that it exposes. */
export type PlanStep = PlannedTile & { tile: RegionTile };

export type PlanInput = {
	telescope: TelescopeNights;
	spec: Pick<TelescopeSpec, 'depth' | 'exposureS' | 'overheadS' | 'maxTiles'>;
	tiles: readonly TileOnSky[];
	/** No exposure starts before this. */
	fromMs: number;
	t0Ms: number;
	fade: FadeModel;
};

/**
 * One pass over the tiles: at each step the visible tile with the most probability × chance of a detection,
 * and among equals (1 %) the one that sets first; each exposure ends inside the tile's window, and exposures are
 * an overhead apart. Waits for the next opening when nothing is visible.
 */
export function tilePlan(input: PlanInput): PlanStep[] {
	const { tiles, spec, fromMs } = input;
	const exposureMs = spec.exposureS * 1000;
	const left = [...tiles]
		.filter(({ tile, windows }) => windows.length > 0 && tile.probability > 0)
		.sort((a, b) => b.tile.probability - a.tile.probability);
	const plan: PlanStep[] = [];
	let clockMs = fromMs;
	while (left.length > 0 && plan.length < spec.maxTiles) {
		const pick = bestTile(input, left, clockMs, exposureMs);
		if (!pick) {
			const opensMs = nextStartMs(left, clockMs, exposureMs);
			if (opensMs === null) break;
			clockMs = opensMs;
			continue;
		}
		const [chosen] = left.splice(pick.index, 1);
		plan.push({
			centre: chosen!.tile.centre,
			rotationDeg: chosen!.tile.rotationDeg,
			startMs: Math.round(clockMs),
			exposureS: spec.exposureS,
			probability: chosen!.tile.probability,
			detectChance: pick.chance,
			tile: chosen!.tile
		});
		clockMs += exposureMs + spec.overheadS * 1000;
	}
	return plan;
}

/** Catch of a plan: Σ probability × chance of a detection. */
export function planCatch(plan: readonly PlannedTile[]): number {
	return plan.reduce((sum, step) => sum + step.probability * step.detectChance, 0);
}

function bestTile(
	input: PlanInput,
	left: readonly TileOnSky[],
	clockMs: number,
	exposureMs: number
): { index: number; chance: number } | null {
	const limitAt = limitMagAt(input, clockMs + exposureMs / 2);
	const visible: { index: number; chance: number; gain: number; setsMs: number }[] = [];
	let most = 0;
	for (let index = 0; index < left.length; index += 1) {
		const { tile, target, windows } = left[index]!;
		// Sorted by probability, and no chance exceeds 1: nothing further down can gain more.
		if (tile.probability < most * (1 - TIE_SHARE)) break;
		const window = windows.find(
			({ startMs, endMs }) => startMs <= clockMs && endMs >= clockMs + exposureMs
		);
		if (!window) continue;
		const chance = detectChance(input.fade, input.t0Ms, clockMs + exposureMs / 2, limitAt(target));
		const gain = tile.probability * chance;
		visible.push({ index, chance, gain, setsMs: window.endMs });
		most = Math.max(most, gain);
	}
	// Equal to the greatest of all, not each to the next: a chain of near equals would lead down.
	return visible
		.filter(({ gain }) => gain >= most * (1 - TIE_SHARE))
		.reduce<(typeof visible)[number] | null>(
			(best, one) =>
				!best || one.setsMs < best.setsMs || (one.setsMs === best.setsMs && one.gain > best.gain)
					? one
					: best,
			null
		);
}

/** Next instant after the clock at which some tile has room for an exposure. */
function nextStartMs(
	left: readonly TileOnSky[],
	clockMs: number,
	exposureMs: number
): number | null {
	let nextMs = Infinity;
	for (const { windows } of left) {
		for (const { startMs, endMs } of windows) {
			if (startMs > clockMs && endMs - startMs >= exposureMs && startMs < nextMs) nextMs = startMs;
		}
	}
	return Number.isFinite(nextMs) ? nextMs : null;
}

/** The depth towards a target at one instant, with what is common to all targets taken out. */
export function limitMagAt(
	{ telescope, spec }: Pick<PlanInput, 'telescope' | 'spec'>,
	utcMs: number
): (target: SkyTarget) => number {
	const { sky } = telescope;
	const moonAltDeg = moonAltitudeDeg(sky, utcMs);
	const phaseAngleDeg = moonAltDeg > 0 ? moonPhase(sky.shared, utcMs).angleDeg : 0;
	return (target) => {
		const altDeg = targetAltitudeDeg(sky, target, utcMs);
		const moon =
			moonAltDeg > 0
				? {
						phaseAngleDeg,
						distanceDeg: moonDistanceDeg(sky, target, utcMs),
						targetZenithDeg: 90 - altDeg,
						moonZenithDeg: 90 - moonAltDeg
					}
				: null;
		return limitMag(spec.depth, spec.exposureS, altDeg, moon);
	};
}
