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
const CORE_LOG = 8;
/** When cells beyond hold more than this share of the probability, all cells follow the density fully. */
const OUTER_SHARE_MAX = 0.003;
/** The 90 % region must hold this many cells, so that its area is good to 1 %. */
const CELLS_IN_REGION = 600;
/** Past this many cells refinement ends: only rings and maps of extreme resolution get here. */
const CELLS_MAX = 250_000;
/** Greatest number of times that all cells are halved beyond what the parts alone ask for. */
const EXTRA_HALVINGS = 12;
/** Shortfall (ln) of an upper bound past which parts plainly do not overlap and need no mesh. */
const HOPELESS_LOG = 60;

type OpenCell = CellPlace & { bound: number; value: number; sideRad: number };

const ORDERS = Array.from({ length: CELL_ORDER_MAX + 1 }, (_, order) => order);
const REACH_RAD = ORDERS.map(cellRadiusRad);
const AREA_SR = ORDERS.map(cellAreaSr);
const SIDE_RAD = AREA_SR.map(Math.sqrt);

/** How fine the cells must be: a factor on what the densities ask for, and where that holds in full. */
type Demand = { scale: number; coreLog: number };

/** The product of densities on cells refined where it matters, normalised. */
export function buildMesh(densities: Density[]): Mesh {
	const peakSum = densities.reduce((sum, density) => sum + density.logPeak, 0);
	const nothing: Mesh = { cells: [], logIntegral: -Infinity, halfChi2: Infinity };
	const demand: Demand = { scale: 1, coreLog: CORE_LOG };
	let best = -Infinity;
	let cells = Array.from({ length: 12 }, (_, pixel) => openCell(densities, 0, pixel, best)).filter(
		(cell) => cell !== null
	);
	for (let halvings = 0; halvings <= EXTRA_HALVINGS; halvings++) {
		const refined = refine(densities, cells, demand, best);
		({ cells, best } = refined);
		const bound = cells.reduce((most, cell) => Math.max(most, cell.bound), -Infinity);
		if (bound < peakSum - HOPELESS_LOG) return nothing;
		if (refined.exhausted) break;
		if (best > -Infinity) {
			const { inRegion, outerShare } = takeStock(cells, best, demand.coreLog);
			if (outerShare > OUTER_SHARE_MAX) demand.coreLog = PRUNE_LOG;
			else if (inRegion >= CELLS_IN_REGION) break;
		}
		demand.scale /= 2;
	}
	return best === -Infinity ? nothing : normalised(cells, best, peakSum);
}

function normalised(cells: OpenCell[], best: number, peakSum: number): Mesh {
	const kept: MeshCell[] = [];
	let sum = 0;
	for (const { order, pixel, at, value } of cells) {
		if (!(value > best - PRUNE_LOG)) continue;
		const density = Math.exp(value - best);
		sum += density * (AREA_SR[order] ?? 0);
		kept.push({ order, pixel, at, density });
	}
	for (const cell of kept) cell.density /= sum;
	return {
		cells: kept,
		logIntegral: best + Math.log(sum),
		halfChi2: Math.max(0, peakSum - best)
	};
}

/** Splits cells, round by round, until each is as fine as demanded. */
function refine(
	densities: Density[],
	start: OpenCell[],
	demand: Demand,
	bestBefore: number
): { cells: OpenCell[]; best: number; exhausted: boolean } {
	let best = start.reduce((most, cell) => Math.max(most, cell.value), bestBefore);
	let open = start;
	const done: OpenCell[] = [];
	let exhausted = false;
	while (open.length > 0) {
		const next: OpenCell[] = [];
		exhausted ||= open.length + done.length > CELLS_MAX;
		const pruneBelow = best - PRUNE_LOG;
		for (const cell of open) {
			if (cell.bound < pruneBelow) continue;
			if (exhausted || cell.order === CELL_ORDER_MAX || !needsSplit(cell, best, demand)) {
				done.push(cell);
				continue;
			}
			for (let pixel = 4 * cell.pixel; pixel < 4 * cell.pixel + 4; pixel++) {
				const child = openCell(densities, cell.order + 1, pixel, pruneBelow);
				if (child) next.push(child);
			}
		}
		for (const cell of next) if (cell.value > best) best = cell.value;
		open = next;
	}
	const pruneBelow = best - PRUNE_LOG;
	return { cells: done.filter((cell) => cell.bound >= pruneBelow), best, exhausted };
}

function needsSplit(cell: OpenCell, best: number, { scale, coreLog }: Demand): boolean {
	const side = SIDE_RAD[cell.order] ?? 0;
	if (cell.bound > best - coreLog) return side > cell.sideRad * scale;
	return cell.sideRad > 0 && side > 4 * cell.sideRad * scale;
}

/** A cell with its bound and value, or null where nothing in it comes up to `pruneBelow`. */
function openCell(
	densities: Density[],
	order: number,
	pixel: number,
	pruneBelow: number
): OpenCell | null {
	const at = cellVector(order, pixel);
	const cell: OpenCell = {
		order,
		pixel,
		at,
		reachRad: REACH_RAD[order] ?? 0,
		bound: 0,
		value: 0,
		sideRad: Infinity
	};
	for (const density of densities) {
		cell.bound += density.logBound(cell);
		if (cell.bound === -Infinity) return null;
	}
	if (cell.bound < pruneBelow) return null;
	for (const density of densities) {
		cell.value += density.logIn(cell);
		cell.sideRad = Math.min(cell.sideRad, density.sideRad(cell));
	}
	return cell;
}

/** How many cells the densest 90 % take, near enough, and the share held by cells past `coreLog`. */
function takeStock(
	cells: OpenCell[],
	best: number,
	coreLog: number
): { inRegion: number; outerShare: number } {
	const probabilities = new Float64Array(256);
	const counts = new Float64Array(256);
	let total = 0;
	let outer = 0;
	for (const { order, value, bound, sideRad } of cells) {
		if (!(value > best - PRUNE_LOG)) continue;
		const bin = Math.min(255, Math.floor((best - value) * 10));
		const probability = Math.exp(value - best) * (AREA_SR[order] ?? 0);
		probabilities[bin] = (probabilities[bin] ?? 0) + probability;
		counts[bin] = (counts[bin] ?? 0) + 1;
		total += probability;
		if (bound <= best - coreLog && sideRad < Infinity) outer += probability;
	}
	let within = 0;
	let inRegion = 0;
	for (let bin = 0; bin < 256 && within < 0.9 * total; bin++) {
		within += probabilities[bin] ?? 0;
		inRegion += counts[bin] ?? 0;
	}
	return { inRegion, outerShare: outer / total };
}
