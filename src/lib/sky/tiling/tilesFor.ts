import { RAD_PER_DEG, type Equatorial } from '../angle';
import { deproject, toVector } from '../vector';
import type { Detector } from '../visibility/telescope';
import {
	fieldAreaDeg2,
	preparedField,
	tileAxes,
	tileContains,
	type Field,
	type Tile
} from './field';
import { bandLattice, fieldCell, flatLattice, type Cell, type Lattice } from './lattice';
import type { RegionSample } from './regionSample';

const COVERED_SHARE = 0.9;
const MOST_SUBPOINTS = 64;
const GOLDEN_ANGLE_RAD = Math.PI * (3 - Math.sqrt(5));

/** One field on the region: its probability, and what it holds of which of the region's points. */
export type RegionTile = Tile & { probability: number; members: Int32Array; parts: Float64Array };

/** Positions to be covered: the region's points, split where they stand for more sky than a field. */
type Samples = {
	count: number;
	positions: Equatorial[];
	x: Float64Array;
	y: Float64Array;
	z: Float64Array;
	probability: Float64Array;
	parent: Int32Array;
	/** Must be covered: within the 90 % region. */
	core: Uint8Array;
};

/**
 * Fields that cover the 90 % region, most probable first and `maxTiles` at most; a region that fits into one
 * field gets one at its middle. No holes between the region's points at any declination; probabilities
 * do not count overlaps twice.
 */
export function tilesFor(
	region: RegionSample,
	detectors: readonly Detector[],
	maxTiles: number
): RegionTile[] {
	if (!(maxTiles >= 1)) throw new RangeError(`maxTiles is ${maxTiles}; it must be at least 1`);
	const field = preparedField(detectors);
	const cell = fieldCell(detectors);
	const samples = coveringSamples(region, detectors, cell, maxTiles);
	const single = singleTile(region, samples, field, detectors);
	if (single) return [single];
	const tiles = arrange(samples, field, detectors, cell, bestLattice(samples, cell, region.middle));
	return tiles.sort((a, b) => b.probability - a.probability).slice(0, maxTiles);
}

/** The lattice with a field on the middle, unless one shifted by half a field needs fewer for the core. */
function bestLattice(samples: Samples, cell: Cell, middle: Equatorial): Lattice {
	let best = latticeFor(cell, middle, { x: 0, y: 0 });
	let fewest = coreCells(samples, best);
	// With many fields the gain is small.
	if (fewest > 16) return best;
	for (const shift of [
		{ x: 0.5, y: 0 },
		{ x: 0, y: 0.5 },
		{ x: 0.5, y: 0.5 }
	]) {
		const lattice = latticeFor(cell, middle, shift);
		const count = coreCells(samples, lattice);
		if (count < fewest) [best, fewest] = [lattice, count];
	}
	return best;
}

function coreCells(samples: Samples, lattice: Lattice): number {
	const keys = new Set<number>();
	for (let i = 0; i < samples.count; i += 1) {
		if (samples.core[i] === 1) keys.add(lattice(samples.positions[i]!).key);
	}
	return keys.size;
}

/** One field at the region's middle when it holds the 90 % region. */
function singleTile(
	region: RegionSample,
	samples: Samples,
	field: Field,
	detectors: readonly Detector[]
): RegionTile | null {
	const centres = [region.middle, pointingFor(region.middle, largest(detectors))];
	for (const centre of centres) {
		const tile = gather(samples, field, { centre, rotationDeg: 0 }, null);
		if (tile && tile.probability >= COVERED_SHARE * region.total - 1e-9) return tile;
	}
	return null;
}

/** Lays the lattice over the samples and adds fields where a core sample falls into a gap. */
function arrange(
	samples: Samples,
	field: Field,
	detectors: readonly Detector[],
	cell: Cell,
	lattice: Lattice
): RegionTile[] {
	const cells = new Map<number, { centre: Equatorial; members: number[]; core: boolean }>();
	for (let i = 0; i < samples.count; i += 1) {
		const { key, centre } = lattice(samples.positions[i]!);
		const known = cells.get(key);
		if (known) {
			known.members.push(i);
			known.core ||= samples.core[i] === 1;
		} else cells.set(key, { centre, members: [i], core: samples.core[i] === 1 });
	}
	const tiles: RegionTile[] = [];
	const covered = new Uint8Array(samples.count);
	for (const { centre, members, core } of cells.values()) {
		if (!core) continue;
		const pointing = { centre: pointingFor(centre, cell), rotationDeg: 0 };
		const tile = gather(samples, field, pointing, covered, members);
		if (tile) tiles.push(tile);
	}
	const main = largest(detectors);
	for (let i = 0; i < samples.count; i += 1) {
		if (covered[i] === 1 || samples.core[i] === 0) continue;
		const tile = gather(
			samples,
			field,
			{ centre: pointingFor(samples.positions[i]!, main), rotationDeg: 0 },
			covered
		);
		if (tile) tiles.push(tile);
	}
	return tiles;
}

function latticeFor(cell: Cell, middle: Equatorial, shift: { x: number; y: number }): Lattice {
	const turned = (((cell.rotationDeg % 90) + 90) % 90) * RAD_PER_DEG;
	if (cell.round || (turned > 1e-6 && turned < Math.PI / 2 - 1e-6)) {
		return flatLattice(cell, middle, shift);
	}
	const upright = Math.round(cell.rotationDeg / 90) % 2 === 0;
	return bandLattice(
		{
			widthDeg: upright ? cell.widthDeg : cell.heightDeg,
			heightDeg: upright ? cell.heightDeg : cell.widthDeg
		},
		middle,
		shift
	);
}

/** The samples inside a tile (of `among`, not yet covered), merged by parent point; null when there is none. */
function gather(
	samples: Samples,
	field: Field,
	tile: Tile,
	covered: Uint8Array | null,
	among?: readonly number[]
): RegionTile | null {
	const axes = tileAxes(tile);
	const members: number[] = [];
	const parts: number[] = [];
	let probability = 0;
	const count = among ? among.length : samples.count;
	for (let k = 0; k < count; k += 1) {
		const i = among ? among[k]! : k;
		if (covered && covered[i] === 1) continue;
		if (!tileContains(field, axes, samples.x[i]!, samples.y[i]!, samples.z[i]!)) continue;
		if (covered) covered[i] = 1;
		probability += samples.probability[i]!;
		const parent = samples.parent[i]!;
		// Parts of one point stand side by side.
		if (members.at(-1) === parent) parts[parts.length - 1]! += samples.probability[i]!;
		else {
			members.push(parent);
			parts.push(samples.probability[i]!);
		}
	}
	if (members.length === 0) return null;
	return {
		...tile,
		probability,
		members: Int32Array.from(members),
		parts: Float64Array.from(parts)
	};
}

/** Where to point so that the cell or detector lands on a position. */
function pointingFor(
	position: Equatorial,
	part: { rotationDeg: number; offsetXDeg: number; offsetYDeg: number }
): Equatorial {
	if (part.offsetXDeg === 0 && part.offsetYDeg === 0) return position;
	const [c, s] = [
		Math.cos(part.rotationDeg * RAD_PER_DEG),
		Math.sin(part.rotationDeg * RAD_PER_DEG)
	];
	return deproject(position, {
		eastDeg: -(part.offsetXDeg * c + part.offsetYDeg * s),
		northDeg: -(-part.offsetXDeg * s + part.offsetYDeg * c)
	});
}

function largest(detectors: readonly Detector[]): Cell {
	const area = (detector: Detector) => fieldAreaDeg2([detector]);
	return fieldCell([detectors.reduce((a, b) => (area(b) > area(a) ? b : a))]);
}

/**
 * The region's points from the densest on, as far as `maxTiles` fields can possibly reach, each split into a
 * spiral of equal parts when it stands for more than a quarter of the smallest detector.
 */
function coveringSamples(
	region: RegionSample,
	detectors: readonly Detector[],
	cell: Cell,
	maxTiles: number
): Samples {
	const smallest = Math.min(...detectors.map((detector) => fieldAreaDeg2([detector])));
	const reachableDeg2 = 3 * maxTiles * fieldAreaDeg2(detectors);
	const chosen: { index: number; parts: number }[] = [];
	let areaDeg2 = 0;
	for (let k = 0; k < region.count; k += 1) {
		const index = region.byDensity[k]!;
		const area = region.areaDeg2[index]!;
		if (areaDeg2 > reachableDeg2 && k > 0) break;
		areaDeg2 += area;
		const parts = Math.max(1, Math.min(MOST_SUBPOINTS, Math.ceil((4 * area) / smallest)));
		chosen.push({ index, parts });
	}
	const count = chosen.reduce((sum, { parts }) => sum + parts, 0);
	const samples: Samples = {
		count,
		positions: [],
		x: new Float64Array(count),
		y: new Float64Array(count),
		z: new Float64Array(count),
		probability: new Float64Array(count),
		parent: new Int32Array(count),
		core: new Uint8Array(count)
	};
	let at = 0;
	chosen.forEach(({ index, parts }, k) => {
		const centre = region.positions[index]!;
		const radiusDeg = Math.sqrt(region.areaDeg2[index]! / Math.PI);
		for (let part = 0; part < parts; part += 1, at += 1) {
			const spread = radiusDeg * Math.sqrt((part + 0.5) / parts);
			const position =
				parts === 1
					? centre
					: deproject(centre, {
							eastDeg: spread * Math.sin(part * GOLDEN_ANGLE_RAD),
							northDeg: spread * Math.cos(part * GOLDEN_ANGLE_RAD)
						});
			const vector = parts === 1 ? null : toVector(position);
			samples.positions.push(position);
			samples.x[at] = vector?.x ?? region.x[index]!;
			samples.y[at] = vector?.y ?? region.y[index]!;
			samples.z[at] = vector?.z ?? region.z[index]!;
			samples.probability[at] = region.probability[index]! / parts;
			samples.parent[at] = index;
			samples.core[at] = k < region.coreCount ? 1 : 0;
		}
	});
	return samples;
}
