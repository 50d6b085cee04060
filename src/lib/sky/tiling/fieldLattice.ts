import { RAD_PER_DEG, type Equatorial } from '../angle';
import { offset, toVector } from '../vector';
import { bandLattice } from './bandLattice';
import { cellOffset, type Cell, type Lattice } from './cell';
import type { Samples } from './coveringSamples';
import { tileAxes, type Tile } from './field';
import { cellTurnedBy, flatLattice } from './flatLattice';
import { latticeTile, northTile, turnAgainstLattice, type Placement } from './placement';

/** Near a pole, a field that keeps its direction to north may need this many times the tiles of one that need not. */
const MOST_FOR_NORTH = 1.4;
/** Where a region counts as near a pole; elsewhere keeping north costs twice the tiles at most. */
const POLAR_DEC_DEG = 75;
/** A field or region smaller than this is flat within the 1 % by which flat lattices overlap. */
const FLAT_FIELD_DEG = 4;
const FLAT_REGION_DEG = 10;
/** Samples looked at where a few stand for all. */
const PROBES = 48;

type Shift = { x: number; y: number };

/** An arrangement that can be shifted by a share of a cell, and the tile that brings the field onto a place of it. */
export type FieldLattice = { at: (shift: Shift) => Lattice; place: Placement };

/** A tile laid on a cell, with the probability in the cell. */
export type LaidTile = { tile: Tile; probability: number };

/**
 * How to lay one cell over the core samples: with tiles of rotation 0, or turned along a flat lattice where a
 * field that keeps its direction to north can't reach or would need 1.4 times as many tiles beyond declination 75°.
 */
export function fieldLattice(samples: Samples, cell: Cell, middle: Equatorial): FieldLattice {
	const probes = coreProbes(samples);
	const polar = probes.some((i) => Math.abs(samples.positions[i]!.decDeg) > POLAR_DEC_DEG);
	const north = northLattice(samples, cell, middle, probes);
	if (!polar || (cell.round && isOnAxis(cell))) return north;
	const turned = turnedLattice(samples, cell, middle, probes);
	const centred = north.at({ x: 0, y: 0 });
	const keys = [...coreCells(samples, centred).keys()];
	const reaches = [
		...keys.map(centred.centreOf),
		...probes.map((i) => samples.positions[i]!)
	].every((position) => north.place(position));
	const free = coreCells(samples, turned.at({ x: 0, y: 0 })).size;
	return reaches && keys.length <= MOST_FOR_NORTH * free ? north : turned;
}

/** Bands of declination for fields aligned with north, a flat lattice for turned, off-axis and round ones. */
function northLattice(
	samples: Samples,
	cell: Cell,
	middle: Equatorial,
	probes: readonly number[]
): FieldLattice {
	const place: Placement = (position) => northTile(position, cell);
	const sideways = isSideways(cell);
	if (sideways !== null) {
		const widthDeg = sideways ? cell.heightDeg : cell.widthDeg;
		const heightDeg = sideways ? cell.widthDeg : cell.heightDeg;
		return { at: (shift) => bandLattice({ widthDeg, heightDeg }, middle, shift), place };
	}
	const turns = cell.round
		? [0]
		: probes.map((i) => turnAgainstLattice(cell, middle, samples.positions[i]!));
	// The probes may miss the greatest turn by a little.
	const spacing = cellTurnedBy(cell, 1.1 * Math.max(...turns) + 0.5);
	const fitting = fittingSphere(cell, spacing, place, samples, probes, middle);
	return { at: (shift) => flatLattice(fitting, middle, shift), place };
}

/** A flat lattice with all fields turned along it. */
function turnedLattice(
	samples: Samples,
	cell: Cell,
	middle: Equatorial,
	probes: readonly number[]
): FieldLattice {
	const place: Placement = (position) => latticeTile(position, cell, middle);
	const fitting = fittingSphere(cell, cell, place, samples, probes, middle);
	return { at: (shift) => flatLattice(fitting, middle, shift), place };
}

/** Cells that hold a core sample, with the probability of all samples in them. */
export function coreCells(samples: Samples, lattice: Lattice): Map<number, number> {
	const cells = new Map<number, { probability: number; core: boolean }>();
	for (let i = 0; i < samples.count; i += 1) {
		const key = lattice.keyOf(samples.positions[i]!, samples.plane[i]!);
		let cell = cells.get(key);
		if (!cell) cells.set(key, (cell = { probability: 0, core: false }));
		cell.probability += samples.probability[i]!;
		if (samples.core[i] === 1) cell.core = true;
	}
	const held = new Map<number, number>();
	for (const [key, { core, probability }] of cells) if (core) held.set(key, probability);
	return held;
}

/** A tile on every cell of the lattice that holds a core sample, most probable first. */
export function lay(samples: Samples, lattice: Lattice, place: Placement): LaidTile[] {
	return [...coreCells(samples, lattice)]
		.sort(([, a], [, b]) => b - a)
		.flatMap(([key, probability]) => {
			const tile = place(lattice.centreOf(key));
			return tile ? [{ tile, probability }] : [];
		});
}

/** Whether an aligned rectangle on the axis lies on its side; null for every other cell. */
function isSideways(cell: Cell): boolean | null {
	const turnedDeg = ((cell.rotationDeg % 90) + 90) % 90;
	if (cell.round || !isOnAxis(cell) || Math.min(turnedDeg, 90 - turnedDeg) > 1e-4) return null;
	return Math.round(cell.rotationDeg / 90) % 2 !== 0;
}

function isOnAxis({ offsetXDeg, offsetYDeg }: Cell): boolean {
	return Math.hypot(offsetXDeg, offsetYDeg) < 1e-6;
}

/** Some of the core samples, evenly taken; made once, as most fields share their samples. */
function coreProbes(samples: Samples): number[] {
	const known = probesOf.get(samples);
	if (known) return known;
	const all: number[] = [];
	for (let i = 0; i < samples.count; i += 1) if (samples.core[i] === 1) all.push(i);
	const stride = Math.max(1, Math.floor(all.length / PROBES));
	const probes = all.filter((_, k) => k % stride === 0);
	probesOf.set(samples, probes);
	return probes;
}

const probesOf = new WeakMap<Samples, number[]>();

/**
 * The spacing, made smaller until its corners lie on the field wherever it is laid: far from the middle the flat
 * lattice is bent, and far from the axis a detector sees less sky than on it.
 */
function fittingSphere(
	cell: Cell,
	spacing: Cell,
	place: Placement,
	samples: Samples,
	probes: readonly number[],
	middle: Equatorial
): Cell {
	const reachDeg =
		Math.hypot(cell.offsetXDeg, cell.offsetYDeg) + Math.max(cell.widthDeg, cell.heightDeg);
	const widest = Math.max(
		0,
		...probes.map((i) => Math.hypot(samples.plane[i]!.eastDeg, samples.plane[i]!.northDeg))
	);
	if (reachDeg < FLAT_FIELD_DEG && widest < FLAT_REGION_DEG) return spacing;
	const corners = cornersOf(spacing).map(({ x, y }) =>
		cellOffset({ rotationDeg: cell.rotationDeg, offsetXDeg: x, offsetYDeg: y })
	);
	let worst = 1;
	for (const i of probes) {
		const { eastDeg, northDeg } = samples.plane[i]!;
		const tile = place(samples.positions[i]!);
		if (!tile) continue;
		for (const corner of corners) {
			const east = eastDeg + corner.eastDeg;
			const north = northDeg + corner.northDeg;
			const onSky = offset(middle, Math.hypot(east, north), Math.atan2(east, north) / RAD_PER_DEG);
			worst = Math.max(worst, shareOfCell(cell, tile, onSky));
		}
	}
	return { ...spacing, widthDeg: spacing.widthDeg / worst, heightDeg: spacing.heightDeg / worst };
}

/** Corners and middles of the sides of a cell 0.9 % smaller, relative to its middle. */
function cornersOf({ round, widthDeg, heightDeg }: Cell): { x: number; y: number }[] {
	const [halfX, halfY] = [(0.991 * widthDeg) / 2, (0.991 * heightDeg) / 2];
	if (!round) {
		return [-1, 0, 1].flatMap((x) => [-1, 0, 1].map((y) => ({ x: x * halfX, y: y * halfY })));
	}
	return [0, 1, 2, 3, 4, 5].map((k) => {
		const angle = (k * Math.PI) / 3;
		return { x: halfX * Math.sin(angle), y: halfY * Math.cos(angle) };
	});
}

/** Distance of a place from the middle of a tile's cell: 1 on the cell's rim. */
function shareOfCell(cell: Cell, tile: Tile, position: Equatorial): number {
	const { along, east, north } = tileAxes(tile);
	const { x, y, z } = toVector(position);
	const part = (axis: number[]) => axis[0]! * x + axis[1]! * y + axis[2]! * z;
	const [e, n] = [part(east) / part(along), part(north) / part(along)];
	const [c, s] = [
		Math.cos(cell.rotationDeg * RAD_PER_DEG),
		Math.sin(cell.rotationDeg * RAD_PER_DEG)
	];
	const u =
		(e * c - n * s - cell.offsetXDeg * RAD_PER_DEG) / Math.tan((cell.widthDeg / 2) * RAD_PER_DEG);
	const v =
		(e * s + n * c - cell.offsetYDeg * RAD_PER_DEG) / Math.tan((cell.heightDeg / 2) * RAD_PER_DEG);
	return cell.round ? Math.hypot(u, v) : Math.max(Math.abs(u), Math.abs(v));
}
