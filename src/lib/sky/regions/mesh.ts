import { CELL_ORDER_MAX, cellAreaSr, cellRadiusRad, cellVector } from '../healpix/healpix';
import type { Vector } from '../vector';
import type { CellPlace, Density } from './density/density';

/** One cell of a joint density: `density` is normalised, per steradian. */
export type MeshCell = { order: number; pixel: number; at: Vector; density: number };

/** A joint density on multi-order cells. */
export type Mesh = {
	cells: MeshCell[];
	/** ln ∫ Π pᵢ dΩ; −Infinity where nothing overlaps. */
	logIntegral: number;
	/** Σ ln max pᵢ − ln max Π pᵢ: how far the best common position falls short, as half a χ². */
	halfChi2: number;
};

/** Cells whose density lies this far (ln) below the greatest hold no probability that matters. */
const PRUNE_LOG = 25;
/** Closer to the greatest density than this, cells follow it fully; beyond, four times coarser. */
const CORE_LOG = 12;
/** The 90 % region must hold this many cells, so that its area is good to 1 %. */
const CELLS_IN_REGION = 600;
/** Past this many cells refinement ends: only rings and maps of extreme resolution get here. */
const CELLS_MAX = 400_000;
/** Greatest number of times that all cells are halved beyond what the parts alone ask for. */
const EXTRA_HALVINGS = 12;
/** Shortfall (ln) of an upper bound past which parts plainly do not overlap and need no mesh. */
const HOPELESS_LOG = 60;

type OpenCell = CellPlace & { bound: number; value: number; sideRad: number };

const REACH_RAD = Array.from({ length: CELL_ORDER_MAX + 1 }, (_, order) => cellRadiusRad(order));
const SIDE_RAD = Array.from({ length: CELL_ORDER_MAX + 1 }, (_, order) =>
	Math.sqrt(cellAreaSr(order))
);

/** The product of densities on cells refined where it matters, normalised. */
export function buildMesh(densities: Density[]): Mesh {
	const peakSum = densities.reduce((sum, density) => sum + density.logPeak, 0);
	const nothing: Mesh = { cells: [], logIntegral: -Infinity, halfChi2: Infinity };
	let cells = Array.from({ length: 12 }, (_, pixel) => openCell(densities, 0, pixel));
	let best = -Infinity;
	for (let halvings = 0; ; halvings++) {
		const refined = refine(densities, cells, 0.5 ** halvings, best);
		({ cells, best } = refined);
		const bound = cells.reduce((most, cell) => Math.max(most, cell.bound), -Infinity);
		if (bound < peakSum - HOPELESS_LOG) return nothing;
		if (refined.exhausted || halvings === EXTRA_HALVINGS) break;
		if (best > -Infinity && cellsInRegion(cells, best) >= CELLS_IN_REGION) break;
	}
	if (best === -Infinity) return nothing;
	const kept = cells.filter((cell) => cell.value > best - PRUNE_LOG);
	let sum = 0;
	for (const { order, value } of kept) sum += Math.exp(value - best) * cellAreaSr(order);
	return {
		cells: kept.map(({ order, pixel, at, value }) => ({
			order,
			pixel,
			at,
			density: Math.exp(value - best) / sum
		})),
		logIntegral: best + Math.log(sum),
		halfChi2: Math.max(0, peakSum - best)
	};
}

/** Splits cells, round by round, until each is as fine as `scale` times what its densities ask for. */
function refine(
	densities: Density[],
	start: OpenCell[],
	scale: number,
	bestBefore: number
): { cells: OpenCell[]; best: number; exhausted: boolean } {
	let best = start.reduce((most, cell) => Math.max(most, cell.value), bestBefore);
	let open = start;
	let done: OpenCell[] = [];
	let exhausted = false;
	while (open.length > 0) {
		const next: OpenCell[] = [];
		exhausted ||= open.length + done.length > CELLS_MAX;
		for (const cell of open) {
			if (cell.bound < best - PRUNE_LOG || cell.bound === -Infinity) continue;
			if (exhausted || cell.order === CELL_ORDER_MAX || !needsSplit(cell, best, scale)) {
				done.push(cell);
				continue;
			}
			for (let child = 0; child < 4; child++) {
				next.push(openCell(densities, cell.order + 1, 4 * cell.pixel + child));
			}
		}
		for (const cell of next) if (cell.value > best) best = cell.value;
		open = next;
	}
	done = done.filter((cell) => cell.bound >= best - PRUNE_LOG);
	return { cells: done, best, exhausted };
}

function needsSplit(cell: OpenCell, best: number, scale: number): boolean {
	const side = SIDE_RAD[cell.order] ?? 0;
	if (cell.bound > best - CORE_LOG) return side > cell.sideRad * scale;
	return cell.sideRad > 0 && side > 4 * cell.sideRad * scale;
}

function openCell(densities: Density[], order: number, pixel: number): OpenCell {
	const place = { order, pixel, at: cellVector(order, pixel), reachRad: REACH_RAD[order] ?? 0 };
	let bound = 0;
	for (const density of densities) {
		bound += density.logBound(place);
		if (bound === -Infinity) return { ...place, bound, value: -Infinity, sideRad: Infinity };
	}
	let value = 0;
	let sideRad = Infinity;
	for (const density of densities) {
		value += density.logIn(place);
		sideRad = Math.min(sideRad, density.sideRad(place));
	}
	return { ...place, bound, value, sideRad };
}

/** How many cells the densest 90 % take, near enough, without sorting them all. */
function cellsInRegion(cells: OpenCell[], best: number): number {
	const bins = new Float64Array(256);
	const counts = new Float64Array(256);
	let total = 0;
	for (const { order, value } of cells) {
		if (!(value > best - PRUNE_LOG)) continue;
		const bin = Math.min(255, Math.floor((best - value) * 10));
		const probability = Math.exp(value - best) * cellAreaSr(order);
		bins[bin] = (bins[bin] ?? 0) + probability;
		counts[bin] = (counts[bin] ?? 0) + 1;
		total += probability;
	}
	let within = 0;
	let count = 0;
	for (let bin = 0; bin < 256 && within < 0.9 * total; bin++) {
		within += bins[bin] ?? 0;
		count += counts[bin] ?? 0;
	}
	return count;
}
