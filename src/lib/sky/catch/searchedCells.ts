import {
	cellAreaSr,
	cellPoint,
	cellRadiusRad,
	cellVector,
	CELL_ORDER_MAX
} from '../healpix/healpix';
import type { Density } from '../regions/density/density';
import type { MeshCell } from '../regions/mesh';
import { tileContains, type TileAxes } from '../tiling/field';
import type { Vector } from '../vector';
import { footprintSide } from './footprintSide';
import { verdictOf, type Look, type Verdict } from './looks';

/** Cells on a footprint's edge with more probability than this are split: at most 50,000 share all of it. */
const EDGE_PROBABILITY = 2e-5;
/** An edge cell that is not split is judged at this many places squared. */
const SAMPLES_PER_SIDE = 4;

/** A cell with its prior density and the mean verdict over it. */
export type SearchedCell = MeshCell & {
	survival: number;
	/** Mean over the whole cell of the chance of being fainter than every limit, 0 where nobody looked. */
	fainter: number;
	/** Share of the cell where nobody looked. */
	elsewhere: number;
};

/** Which looks surely cover a cell, and which tiles of the others have an edge in it. */
type Coverage = { covering: Set<Look>; open: { look: Look; tile: TileAxes }[] };

/**
 * Cells of a normalised mesh, split along the edges of footprints, with what was seen of each. Every cell's
 * children share its probability as `densities` say. Edges are good to 0.1 % of the probability.
 */
export function searchedCells(
	cells: readonly MeshCell[],
	densities: readonly Density[],
	looks: readonly Look[]
): SearchedCell[] {
	const all: Coverage = {
		covering: new Set(),
		open: looks.flatMap((look) => look.axes.map((tile) => ({ look, tile })))
	};
	const done: SearchedCell[] = [];
	const visit = (cell: MeshCell, inherited: Coverage) => {
		const coverage = narrowed(cell, inherited);
		if (coverage.open.length === 0) {
			done.push({ ...cell, ...shares([verdictWhere(looks, coverage)]) });
		} else if (
			cell.order < CELL_ORDER_MAX &&
			cell.density * cellAreaSr(cell.order) > EDGE_PROBABILITY
		) {
			for (const child of childrenOf(cell, densities)) visit(child, coverage);
		} else done.push({ ...cell, ...shares(sampled(cell, looks, coverage)) });
	};
	for (const cell of cells) visit(cell, all);
	return done;
}

function narrowed(cell: MeshCell, { covering, open }: Coverage): Coverage {
	if (open.length === 0) return { covering, open };
	const reachRad = cellRadiusRad(cell.order);
	const inside = new Set(covering);
	const crossing: Coverage['open'] = [];
	for (const item of open) {
		if (inside.has(item.look)) continue;
		const side = footprintSide(item.look.field, item.tile, cell.at, reachRad);
		if (side === 'inside') inside.add(item.look);
		else if (side === 'edge') crossing.push(item);
	}
	return { covering: inside, open: crossing.filter(({ look }) => !inside.has(look)) };
}

/** The verdict at one place of a cell, or of all of it where no edge crosses it. */
function verdictWhere(looks: readonly Look[], { covering, open }: Coverage, at?: Vector): Verdict {
	return verdictOf(
		looks.filter(
			(look) =>
				covering.has(look) ||
				(at !== undefined &&
					open.some(
						(item) => item.look === look && tileContains(look.field, item.tile, at.x, at.y, at.z)
					))
		)
	);
}

function sampled(cell: MeshCell, looks: readonly Look[], coverage: Coverage): Verdict[] {
	const verdicts: Verdict[] = [];
	for (let i = 0; i < SAMPLES_PER_SIDE * SAMPLES_PER_SIDE; i++) {
		const u = ((i % SAMPLES_PER_SIDE) + 0.5) / SAMPLES_PER_SIDE;
		const v = (Math.floor(i / SAMPLES_PER_SIDE) + 0.5) / SAMPLES_PER_SIDE;
		verdicts.push(verdictWhere(looks, coverage, cellPoint(cell.order, cell.pixel, u, v)));
	}
	return verdicts;
}

function shares(verdicts: Verdict[]): Pick<SearchedCell, 'survival' | 'fainter' | 'elsewhere'> {
	const mean = (value: (verdict: Verdict) => number) =>
		verdicts.reduce((sum, verdict) => sum + value(verdict), 0) / verdicts.length;
	return {
		survival: mean(({ survival }) => survival),
		fainter: mean(({ looked, fainter }) => (looked ? fainter : 0)),
		elsewhere: mean(({ looked }) => (looked ? 0 : 1))
	};
}

/** The four children, their densities in the proportion that `densities` give, their mean the parent's. */
function childrenOf(cell: MeshCell, densities: readonly Density[]): MeshCell[] {
	const order = cell.order + 1;
	const places = [0, 1, 2, 3].map((i) => {
		const pixel = 4 * cell.pixel + i;
		const at = cellVector(order, pixel);
		const place = { order, pixel, at, reachRad: cellRadiusRad(order) };
		return { ...place, log: densities.reduce((sum, density) => sum + density.logIn(place), 0) };
	});
	const most = places.reduce((greatest, { log }) => Math.max(greatest, log), -Infinity);
	const weights = places.map(({ log }) => (most > -Infinity ? Math.exp(log - most) : 1));
	const mean = weights.reduce((sum, weight) => sum + weight, 0) / 4;
	return places.map(({ pixel, at }, i) => ({
		order,
		pixel,
		at,
		density: (cell.density * weights[i]!) / mean
	}));
}
