import type { Detector } from '../visibility/telescope';
import { fieldCell } from './cell';
import { coveringSamples, type Samples } from './coveringSamples';
import { preparedField, tileAxes, tileContains, type Field, type Tile } from './field';
import { coreCells, fieldLattice, lay, type FieldLattice } from './fieldLattice';
import { gapTiles, largestCell } from './gapTiles';
import { latticeTile, northTile } from './placement';
import type { RegionSample } from './regionSample';

/** Up to so many tiles the lattice is shifted to suit the region; with more the gain is small. */
const FEW_TILES = 16;

/** One field on the region: its probability and what it holds of which of the region's points. */
export type RegionTile = Tile & { probability: number; members: Int32Array; parts: Float64Array };

/**
 * Fields that cover the 90 % region, most probable first and `maxTiles` at most; a region that fits into one field
 * gets one at its middle. Without holes at any declination, the poles included. Tiles have rotation 0, but are
 * turned near a pole where a field that keeps its direction to north can't reach or would need 1.4 times as many.
 * Overlaps count once, so a field that closes a gap may have no probability of its own.
 */
export function tilesFor(
	region: RegionSample,
	detectors: readonly Detector[],
	maxTiles: number
): RegionTile[] {
	if (!(maxTiles >= 1)) throw new RangeError(`maxTiles is ${maxTiles}; it must be at least 1`);
	const field = preparedField(detectors);
	const samples = coveringSamples(region, detectors, maxTiles);
	const single = singleTile(region, samples, field, detectors);
	if (single) return [single];
	const lattice = fieldLattice(samples, fieldCell(detectors), region.middle);
	const shift = bestShift(samples, lattice);
	const laid = lay(samples, lattice.at(shift), lattice.place).map(({ tile }) => tile);
	const crowded = laid.length >= maxTiles;
	// Some more than asked for, as overlaps may change their order.
	const likely = crowded ? laid.slice(0, Math.ceil(1.2 * maxTiles)) : laid;
	const gaps =
		detectors.length > 1 && !crowded
			? gapTiles(field, detectors, samples, region.middle, laid)
			: [];
	return gatherAll(samples, field, [...likely, ...gaps]).slice(0, maxTiles);
}

/** One field at the region's middle when it holds the whole 90 % region. */
function singleTile(
	{ middle }: RegionSample,
	samples: Samples,
	field: Field,
	detectors: readonly Detector[]
): RegionTile | null {
	const main = largestCell(detectors);
	const onMain = northTile(middle, main) ?? latticeTile(middle, main, middle);
	for (const tile of [{ centre: middle, rotationDeg: 0 }, onMain]) {
		if (holdsCore(samples, field, tile)) {
			return gather(samples, field, tile, new Uint8Array(samples.count));
		}
	}
	return null;
}

function holdsCore({ count, core, x, y, z }: Samples, field: Field, tile: Tile): boolean {
	const axes = tileAxes(tile);
	for (let i = 0; i < count; i += 1) {
		if (core[i] === 1 && !tileContains(field, axes, x[i]!, y[i]!, z[i]!)) return false;
	}
	return true;
}

/** A field on the middle, unless a lattice shifted by half a field gets to the source in fewer tiles. */
function bestShift(samples: Samples, lattice: FieldLattice): { x: number; y: number } {
	let best = { x: 0, y: 0 };
	const cells = coreCells(samples, lattice.at(best));
	if (cells.size > FEW_TILES) return best;
	let least = meanRank(cells);
	for (const shift of [
		{ x: 0.5, y: 0 },
		{ x: 0, y: 0.5 },
		{ x: 0.5, y: 0.5 }
	]) {
		const rank = meanRank(coreCells(samples, lattice.at(shift)));
		if (rank < least) [best, least] = [shift, rank];
	}
	return best;
}

/** How many tiles it takes on average to get to the source, most probable tiles first. */
function meanRank(cells: ReadonlyMap<number, number>): number {
	return [...cells.values()]
		.sort((a, b) => b - a)
		.reduce((sum, probability, i) => sum + probability * (i + 1), 0);
}

/** What each tile holds that none before it does, most probable first. */
function gatherAll(samples: Samples, field: Field, tiles: readonly Tile[]): RegionTile[] {
	const covered = new Uint8Array(samples.count);
	return tiles
		.map((tile) => gather(samples, field, tile, covered))
		.sort((a, b) => b.probability - a.probability);
}

/** The samples inside a tile that are not yet covered, merged by parent point; they count as covered then. */
function gather(samples: Samples, field: Field, tile: Tile, covered: Uint8Array): RegionTile {
	const axes = tileAxes(tile);
	const members: number[] = [];
	const parts: number[] = [];
	let probability = 0;
	for (let i = 0; i < samples.count; i += 1) {
		if (covered[i] === 1) continue;
		if (!tileContains(field, axes, samples.x[i]!, samples.y[i]!, samples.z[i]!)) continue;
		covered[i] = 1;
		if (samples.probability[i] === 0) continue;
		probability += samples.probability[i]!;
		const parent = samples.parent[i]!;
		// Parts of one point stand side by side.
		if (members.at(-1) === parent) parts[parts.length - 1]! += samples.probability[i]!;
		else {
			members.push(parent);
			parts.push(samples.probability[i]!);
		}
	}
	return {
		...tile,
		probability,
		members: Int32Array.from(members),
		parts: Float64Array.from(parts)
	};
}
