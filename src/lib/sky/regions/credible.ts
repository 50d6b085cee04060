import { DEG_PER_RAD } from '../angle';
import { cellAreaSr } from '../healpix/healpix';
import { coarsened, mocFromSorted, type MocRanges } from '../moc/moc';
import { angleBetweenDeg, type Vector } from '../vector';
import { vectorAt, type CellColumns } from './cellColumns';

/** A highest-density set: exact area by sharing the last cell, coverage with that cell whole. */
export type CredibleRegion = { areaDeg2: number; moc: MocRanges };

/** Long thin rings are covered by somewhat larger cells rather than by more ranges. */
const MOC_RANGES_MAX = 2000;
/** Halvings of the threshold: 40 leave it known to 1e-12, or to the last few cells much sooner. */
const HALVINGS = 40;

/**
 * The smallest set of cells that holds `share` (0 to 1) of their probability; cells of equal density enter
 * in order of distance from `middle`, so that a uniform density gives one patch.
 */
export function credibleRegion(
	cells: CellColumns,
	probability: Float64Array,
	share: number,
	middle: Vector
): CredibleRegion {
	const { order, density } = cells;
	const { low, high } = thresholdOf(density, probability, share);
	const inside = new Uint8Array(density.length);
	const around: number[] = [];
	let held = 0;
	let areaSr = 0;
	for (let i = 0; i < density.length; i++) {
		const value = density[i] ?? 0;
		if (value >= high) {
			inside[i] = 1;
			held += probability[i] ?? 0;
			areaSr += cellAreaSr(order[i] ?? 0);
		} else if (value >= low && value > 0) around.push(i);
	}
	for (const i of inOrderOfEntry(cells, around, middle)) {
		if (held >= share) break;
		const own = probability[i] ?? 0;
		areaSr += Math.min(1, (share - held) / own) * cellAreaSr(order[i] ?? 0);
		held += own;
		inside[i] = 1;
	}
	return {
		areaDeg2: areaSr * DEG_PER_RAD * DEG_PER_RAD,
		moc: coarsened(coverageOf(cells, inside), MOC_RANGES_MAX)
	};
}

/** Densest first, then nearest to `middle`, then by position. */
function inOrderOfEntry(cells: CellColumns, around: number[], middle: Vector): number[] {
	const distanceDeg = around.map((i) => angleBetweenDeg(vectorAt(cells, i), middle));
	return around
		.map((cell, at) => ({ cell, at }))
		.sort(
			(a, b) =>
				(cells.density[b.cell] ?? 0) - (cells.density[a.cell] ?? 0) ||
				(distanceDeg[a.at] ?? 0) - (distanceDeg[b.at] ?? 0) ||
				a.cell - b.cell
		)
		.map(({ cell }) => cell);
}

/** Densities from `high` on hold at most `share`, those from `low` on more; few cells lie between. */
function thresholdOf(
	density: Float64Array,
	probability: Float64Array,
	share: number
): { low: number; high: number } {
	let high = density.reduce((most, value) => Math.max(most, value), 0) * (1 + 1e-12);
	let low = 0;
	// Bisection on the threshold, first by factors of 4: passes over the cells cost less than sorting them.
	for (let step = 0; step < HALVINGS; step++) {
		const middle = low === 0 ? high / 4 : (low + high) / 2;
		let held = 0;
		let between = 0;
		for (let i = 0; i < density.length; i++) {
			const value = density[i] ?? 0;
			if (value >= middle) held += probability[i] ?? 0;
			if (value >= low && value < high) between++;
		}
		if (held > share) low = middle;
		else high = middle;
		if (between <= 1 && low > 0) break;
	}
	return { low, high };
}

function coverageOf({ finest, order, start }: CellColumns, inside: Uint8Array): MocRanges {
	const count = inside.reduce((sum, one) => sum + one, 0);
	const starts = new Float64Array(count);
	const ends = new Float64Array(count);
	let at = 0;
	for (let i = 0; i < inside.length; i++) {
		if (!inside[i]) continue;
		starts[at] = start[i] ?? 0;
		ends[at++] = (start[i] ?? 0) + 4 ** (finest - (order[i] ?? 0));
	}
	return mocFromSorted(finest, starts, ends);
}
