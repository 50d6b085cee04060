import { cellAreaSr, cellRadiusRad, cellVector, CELL_ORDER_MAX } from '../healpix/healpix';
import type { Density } from '../regions/density/density';
import type { MeshCell } from '../regions/mesh';
import { tileContains, type TileAxes } from '../tiling/field';
import { footprintSide } from '../tiling/footprintSide';
import { verdictOf, type Look, type Verdict } from './looks';

/** Cells on a footprint's edge with more probability than this are split in four: at most 10,000 share all of it. */
const EDGE_PROBABILITY = 1e-4;
/** Other cells on an edge are divided once more, this many orders down, and each piece judged at its centre. */
const LAST_ORDERS = 2;
/** Cells with less probability than this are judged whole, at their centre: nobody sees the difference. */
const NEGLIGIBLE_PROBABILITY = 1e-6;

/** A cell with its prior density and what was seen of it. */
export type SearchedCell = MeshCell & Verdict;

/** Which looks surely cover a cell, and which tiles of the others have an edge in it. */
type Coverage = { covering: Set<Look>; open: { look: Look; tile: TileAxes }[] };

/**
 * Cells of a normalised mesh, split along the edges of footprints, with what was seen of each. Every cell's
 * children share its probability as `densities` say.
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
			done.push({ ...cell, ...verdictOf(looks.filter((look) => coverage.covering.has(look))) });
		} else if (
			cell.order < CELL_ORDER_MAX &&
			cell.density * cellAreaSr(cell.order) > EDGE_PROBABILITY
		) {
			for (const child of childrenOf(cell, densities)) visit(child, coverage);
		} else for (const piece of divided(cell, looks, coverage)) done.push(piece);
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

/** A cell with an edge in it as small pieces of its own density, or whole where the edge misses all their centres. */
function divided(
	cell: MeshCell,
	looks: readonly Look[],
	{ covering, open }: Coverage
): SearchedCell[] {
	// Most looks are nowhere near the cell: they are left out once, not for each piece.
	const near = looks
		.map((look) => ({
			look,
			covers: covering.has(look),
			tiles: open.filter((item) => item.look === look).map(({ tile }) => tile)
		}))
		.filter(({ covers, tiles }) => covers || tiles.length > 0);
	const negligible = cell.density * cellAreaSr(cell.order) < NEGLIGIBLE_PROBABILITY;
	const order = negligible ? cell.order : Math.min(CELL_ORDER_MAX, cell.order + LAST_ORDERS);
	const count = 4 ** (order - cell.order);
	const pieces = Array.from({ length: count }, (_, i): SearchedCell => {
		const pixel = cell.pixel * count + i;
		const at = cellVector(order, pixel);
		const here = near.filter(
			({ look, covers, tiles }) =>
				covers || tiles.some((tile) => tileContains(look.field, tile, at.x, at.y, at.z))
		);
		const verdict = verdictOf(here.map(({ look }) => look));
		return { order, pixel, at, density: cell.density, ...verdict };
	});
	const [first] = pieces;
	const alike = pieces.every(
		({ survival, fainter, looked }) =>
			survival === first?.survival && fainter === first.fainter && looked === first.looked
	);
	if (!alike || !first) return pieces;
	const { survival, fainter, looked } = first;
	return [{ ...cell, survival, fainter, looked }];
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
