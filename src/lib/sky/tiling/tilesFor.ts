import type { Equatorial } from '../angle';
import { deproject, toVector } from '../vector';
import type { Detector } from '../visibility/telescope';
import { bandLattice } from './bandLattice';
import { cellOffset, fieldCell, pointingFor, type Cell, type Lattice } from './cell';
import { coveringSamples, type Samples } from './coveringSamples';
import {
	fieldAreaDeg2,
	preparedField,
	tileAxes,
	tileContains,
	type Field,
	type Tile,
	type TileAxes
} from './field';
import { cellTurnedBy, flatLattice, turnAgainstLattice } from './flatLattice';
import type { RegionSample } from './regionSample';

const COVERED_SHARE = 0.9;
/** Guard points along each side of a detector when gaps of a mosaic are searched. */
const GUARDS = 17;

/** One field on the region: its probability and what it holds of which of the region's points. */
export type RegionTile = Tile & { probability: number; members: Int32Array; parts: Float64Array };

/**
 * Fields that cover the 90 % region, most probable first and `maxTiles` at most; a region that fits into one field
 * gets one at its middle. Without holes at any declination, the poles included; only a field without a detector on
 * its axis can't reach the very pole, as it keeps its direction to north. Overlaps count once, so a field that
 * closes a gap may have no probability of its own.
 */
export function tilesFor(
	region: RegionSample,
	detectors: readonly Detector[],
	maxTiles: number
): RegionTile[] {
	if (!(maxTiles >= 1)) throw new RangeError(`maxTiles is ${maxTiles}; it must be at least 1`);
	const field = preparedField(detectors);
	const cell = fieldCell(detectors);
	const samples = coveringSamples(region, detectors, maxTiles);
	const single = singleTile(region, samples, field, detectors);
	if (single) return [single];
	const laid = lay(samples, cell, bestLattice(samples, cell, region.middle));
	const crowded = laid.length >= maxTiles;
	// Some more than asked for, as overlaps may change their order.
	const likely = crowded ? laid.slice(0, Math.ceil(1.2 * maxTiles)) : laid;
	const gaps =
		detectors.length > 1 && !crowded ? gapTiles(field, region, samples, detectors, laid) : [];
	return gatherAll(samples, field, [...likely, ...gaps]).slice(0, maxTiles);
}

/** One field at the region's middle when it holds the 90 % region. */
function singleTile(
	region: RegionSample,
	samples: Samples,
	field: Field,
	detectors: readonly Detector[]
): RegionTile | null {
	for (const centre of [region.middle, pointingFor(region.middle, largest(detectors))]) {
		const tile = gather(samples, field, { centre, rotationDeg: 0 }, new Uint8Array(samples.count));
		if (tile.probability >= COVERED_SHARE * region.total - 1e-9) return tile;
	}
	return null;
}

/** The lattice with a field on the middle, unless one shifted by half a field needs fewer for the core. */
function bestLattice(samples: Samples, cell: Cell, middle: Equatorial): Lattice {
	const shifted = latticeFor(samples, cell, middle);
	let best = shifted({ x: 0, y: 0 });
	let fewest = coreCells(samples, best).size;
	// With many fields the gain is small.
	if (fewest > 16) return best;
	for (const shift of [
		{ x: 0.5, y: 0 },
		{ x: 0, y: 0.5 },
		{ x: 0.5, y: 0.5 }
	]) {
		const lattice = shifted(shift);
		const count = coreCells(samples, lattice).size;
		if (count < fewest) [best, fewest] = [lattice, count];
	}
	return best;
}

/** Bands of declination for fields aligned with north, a flat lattice for turned, off-axis and round ones. */
function latticeFor(
	samples: Samples,
	cell: Cell,
	middle: Equatorial
): (shift: { x: number; y: number }) => Lattice {
	const turnedDeg = ((cell.rotationDeg % 90) + 90) % 90;
	const aligned = Math.min(turnedDeg, 90 - turnedDeg) < 1e-4;
	const onAxis = Math.hypot(cell.offsetXDeg, cell.offsetYDeg) < 1e-6;
	if (!cell.round && aligned && onAxis) {
		const upright = Math.round(cell.rotationDeg / 90) % 2 === 0;
		const widthDeg = upright ? cell.widthDeg : cell.heightDeg;
		const heightDeg = upright ? cell.heightDeg : cell.widthDeg;
		return (shift) => bandLattice({ widthDeg, heightDeg }, middle, shift);
	}
	const fitting = cell.round ? cell : cellTurnedBy(cell, mostTurnDeg(samples, cell, middle));
	return (shift) => flatLattice(fitting, middle, shift);
}

/** Greatest turn of a field against the lattice over the core, from about 200 samples with a margin. */
function mostTurnDeg(samples: Samples, cell: Cell, middle: Equatorial): number {
	const stride = Math.max(1, Math.floor(samples.count / 200));
	let mostDeg = 0;
	for (let i = 0; i < samples.count; i += stride) {
		if (samples.core[i] === 0) continue;
		mostDeg = Math.max(mostDeg, turnAgainstLattice(cell, middle, samples.positions[i]!));
	}
	return mostDeg * 1.1 + 0.5;
}

/** Cells that hold a core sample, with the probability of all samples in them. */
function coreCells(
	samples: Samples,
	lattice: Lattice
): Map<number, { probability: number; core: boolean }> {
	const cells = new Map<number, { probability: number; core: boolean }>();
	for (let i = 0; i < samples.count; i += 1) {
		const key = lattice.keyOf(samples.positions[i]!, samples.plane[i]!);
		let cell = cells.get(key);
		if (!cell) cells.set(key, (cell = { probability: 0, core: false }));
		cell.probability += samples.probability[i]!;
		if (samples.core[i] === 1) cell.core = true;
	}
	for (const [key, { core }] of cells) if (!core) cells.delete(key);
	return cells;
}

/** A field on every cell of the lattice that holds a core sample, most probable first. */
function lay(samples: Samples, cell: Cell, lattice: Lattice): Tile[] {
	return [...coreCells(samples, lattice)]
		.sort(([, a], [, b]) => b.probability - a.probability)
		.map(([key]) => ({ centre: pointingFor(lattice.centreOf(key), cell), rotationDeg: 0 }));
}

/** Pointings of the main detector onto those of its cells that the fields laid so far leave a part of open. */
function gapTiles(
	field: Field,
	region: RegionSample,
	samples: Samples,
	detectors: readonly Detector[],
	laid: readonly Tile[]
): Tile[] {
	const main = largest(detectors);
	const cells = lay(samples, main, latticeFor(samples, main, region.middle)({ x: 0, y: 0 }));
	const all = laid.map((tile) => ({ axes: tileAxes(tile), vector: toVector(tile.centre) }));
	const nearCosine = Math.cos(Math.atan(2.2 * field.reach));
	const added: Tile[] = [];
	for (const tile of cells) {
		const { x, y, z } = toVector(tile.centre);
		const near = all
			.filter(({ vector }) => vector.x * x + vector.y * y + vector.z * z > nearCosine)
			.map(({ axes }) => axes);
		if (guardsOf(main, tile.centre).every((guard) => isHeld(field, near, guard))) continue;
		added.push(tile);
		all.push({ axes: tileAxes(tile), vector: toVector(tile.centre) });
	}
	return added;
}

/** Positions spread over the main detector of a pointing. */
function guardsOf(main: Cell, pointing: Equatorial): Equatorial[] {
	return Array.from({ length: GUARDS * GUARDS }, (_, i) => {
		// A hair inside the rim, which belongs to the neighbour as well.
		const x = 0.999 * ((i % GUARDS) / (GUARDS - 1) - 0.5);
		const y = 0.999 * (Math.floor(i / GUARDS) / (GUARDS - 1) - 0.5);
		const offset = cellOffset({
			rotationDeg: main.rotationDeg,
			offsetXDeg: main.offsetXDeg + x * main.widthDeg,
			offsetYDeg: main.offsetYDeg + y * main.heightDeg
		});
		return deproject(pointing, offset);
	});
}

function isHeld(field: Field, tiles: readonly TileAxes[], position: Equatorial): boolean {
	const { x, y, z } = toVector(position);
	return tiles.some((axes) => tileContains(field, axes, x, y, z));
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

function largest(detectors: readonly Detector[]): Cell {
	const area = (detector: Detector) => fieldAreaDeg2([detector]);
	return fieldCell([detectors.reduce((a, b) => (area(b) > area(a) ? b : a))]);
}
