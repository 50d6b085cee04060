import { RAD_PER_DEG, type Equatorial } from '../angle';
import { footprintSide } from './footprintSide';
import { toVector, type Vector } from '../vector';
import type { Detector } from '../visibility/telescope';
import { fieldCell, type Cell } from './cell';
import type { Samples } from './coveringSamples';
import {
	fieldAreaDeg2,
	tileAxes,
	tileContains,
	type Field,
	type Tile,
	type TileAxes
} from './field';
import { fieldLattice, lay } from './fieldLattice';

/** A gap is surely found when it is as wide as this share of the largest detector. */
const FINEST_SHARE = 1 / 64;

type Standing = { axes: TileAxes; centre: Vector };

/**
 * Pointings of a mosaic's largest detector onto those of its cells that the fields laid so far leave a part of
 * open; the detector is divided where edges cross it, down to a 64th.
 */
export function gapTiles(
	field: Field,
	detectors: readonly Detector[],
	samples: Samples,
	middle: Equatorial,
	laid: readonly Tile[]
): Tile[] {
	const main = largestCell(detectors);
	const { at, place } = fieldLattice(samples, main, middle);
	// Farther apart than this, two pointings of the field share no sky.
	const nearCosine = Math.cos(Math.min(Math.PI, 2 * Math.atan(field.reach) + 1e-3));
	const standing: Standing[] = laid.map(standingOf);
	const added: Tile[] = [];
	for (const { tile } of lay(samples, at({ x: 0, y: 0 }), place)) {
		const one = standingOf(tile);
		const near = standing.filter(({ centre }) => cosine(centre, one.centre) > nearCosine);
		const axes = near.map((other) => other.axes);
		if (!isOpen(field, main, one.axes, axes)) continue;
		added.push(tile);
		standing.push(one);
	}
	return added;
}

/** The cell of the largest detector. */
export function largestCell(detectors: readonly Detector[]): Cell {
	const area = (detector: Detector) => fieldAreaDeg2([detector]);
	return fieldCell([detectors.reduce((a, b) => (area(b) > area(a) ? b : a))]);
}

/** Whether some of the sky on a tile's main detector is on no detector of the other tiles. */
function isOpen(field: Field, main: Cell, tile: TileAxes, others: readonly TileAxes[]): boolean {
	const halfX = Math.tan((main.widthDeg / 2) * RAD_PER_DEG);
	const halfY = Math.tan((main.heightDeg / 2) * RAD_PER_DEG);
	const c = Math.cos(main.rotationDeg * RAD_PER_DEG);
	const s = Math.sin(main.rotationDeg * RAD_PER_DEG);
	const visit = (u: number, v: number, share: number, tiles: readonly TileAxes[]): boolean => {
		if (main.round && Math.hypot(u, v) - share * Math.SQRT2 > 1) return false;
		const x = u * halfX + main.offsetXDeg * RAD_PER_DEG;
		const y = v * halfY + main.offsetYDeg * RAD_PER_DEG;
		const place = placeOf(tile, x * c + y * s, y * c - x * s);
		const crossing: TileAxes[] = [];
		for (const axes of tiles) {
			const side = footprintSide(field, axes, place, share * Math.hypot(halfX, halfY));
			if (side === 'inside') return false;
			if (side === 'edge') crossing.push(axes);
		}
		if (share <= FINEST_SHARE || (crossing.length === 0 && !main.round)) {
			// The rim belongs to the neighbours as well.
			const reach = main.round ? Math.hypot(u, v) : Math.max(Math.abs(u), Math.abs(v));
			if (reach > 0.99 && share <= FINEST_SHARE) return false;
			return !crossing.some((axes) => tileContains(field, axes, place.x, place.y, place.z));
		}
		const half = share / 2;
		return [-half, half].some((du) =>
			[-half, half].some((dv) => visit(u + du, v + dv, half, crossing))
		);
	};
	return visit(0, 0, 1, others);
}

/** The direction at tangents `e` and `n` to east and north of a tile's pointing. */
function placeOf({ along, east, north }: TileAxes, e: number, n: number): Vector {
	const part = (i: number) => along[i]! + e * east[i]! + n * north[i]!;
	const scale = 1 / Math.sqrt(1 + e * e + n * n);
	return { x: scale * part(0), y: scale * part(1), z: scale * part(2) };
}

function standingOf(tile: Tile): Standing {
	return { axes: tileAxes(tile), centre: toVector(tile.centre) };
}

function cosine(a: Vector, b: Vector): number {
	return a.x * b.x + a.y * b.y + a.z * b.z;
}
