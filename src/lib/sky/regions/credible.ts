import { DEG_PER_RAD } from '../angle';
import { cellAreaSr } from '../healpix/healpix';
import { coarsened, mocFromCells, type MocRanges } from '../moc/moc';
import { angleBetweenDeg, type Vector } from '../vector';
import type { MeshCell } from './mesh';

/** A highest-density set: exact area by sharing the last cell, coverage with that cell whole. */
export type CredibleRegion = { areaDeg2: number; moc: MocRanges };

/** Long thin rings are covered by somewhat larger cells rather than by more ranges. */
const MOC_RANGES_MAX = 2000;

/**
 * The smallest set of cells that holds `share` (0 to 1) of a normalised mesh; cells of equal density enter
 * in order of distance from `middle`, so that a uniform density gives one patch.
 */
export function credibleRegion(cells: MeshCell[], share: number, middle: Vector): CredibleRegion {
	const { above, around } = splitAtThreshold(cells, share);
	const distance = new Map(around.map((cell) => [cell, angleBetweenDeg(cell.at, middle)]));
	around.sort(
		(a, b) =>
			b.density - a.density ||
			(distance.get(a) ?? 0) - (distance.get(b) ?? 0) ||
			a.order - b.order ||
			a.pixel - b.pixel
	);
	const covered = above;
	let held = above.reduce((sum, cell) => sum + probabilityOf(cell), 0);
	let areaSr = above.reduce((sum, cell) => sum + cellAreaSr(cell.order), 0);
	for (const cell of around) {
		if (held >= share) break;
		const probability = probabilityOf(cell);
		const part = Math.min(1, (share - held) / probability);
		areaSr += part * cellAreaSr(cell.order);
		held += probability;
		covered.push(cell);
	}
	return {
		areaDeg2: areaSr * DEG_PER_RAD * DEG_PER_RAD,
		moc: coarsened(mocFromCells(covered), MOC_RANGES_MAX)
	};
}

/** Cells surely inside, and the few with density so near the threshold that they must be sorted. */
function splitAtThreshold(
	cells: MeshCell[],
	share: number
): { above: MeshCell[]; around: MeshCell[] } {
	const densities = Float64Array.from(cells, (cell) => cell.density);
	const probabilities = Float64Array.from(cells, probabilityOf);
	let high = densities.reduce((most, density) => Math.max(most, density), 0) * (1 + 1e-12);
	let low = 0;
	// Bisection on the threshold, first by factors of 4: passes over the cells cost less than sorting them.
	for (let step = 0; step < 40; step++) {
		const middle = low === 0 ? high / 4 : (low + high) / 2;
		let held = 0;
		for (let i = 0; i < densities.length; i++) {
			if ((densities[i] ?? 0) >= middle) held += probabilities[i] ?? 0;
		}
		if (held > share) low = middle;
		else high = middle;
	}
	const above: MeshCell[] = [];
	const around: MeshCell[] = [];
	for (const cell of cells) {
		if (cell.density >= high) above.push(cell);
		else if (cell.density >= low && cell.density > 0) around.push(cell);
	}
	return { above, around };
}

function probabilityOf(cell: MeshCell): number {
	return cell.density * cellAreaSr(cell.order);
}
