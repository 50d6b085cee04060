import { searchedCells } from './searchedCells';
import { prepareLooks, type NotFound } from './looks';
import { cellAreaSr } from '../healpix/healpix';
import type { FadeModel } from '../outlook/outlook';
import { canonicalOrder } from '../regions/canonicalOrder';
import { columnsOf, type CellColumns } from '../regions/cellColumns';
import { columnsOfMap } from '../regions/mapRegion';
import { buildMesh } from '../regions/mesh';
import { mixedCells } from '../regions/mixedCells';
import { agreeingGroups, multiplyParts, prepareParts, type Part } from '../regions/parts';
import type { Shape } from '../regions/shape';

/** Reports of nothing, from `t0Ms` on, and how the source fades. */
export type Search = { reports: readonly NotFound[]; t0Ms: number; fade: FadeModel };

type Looks = ReturnType<typeof prepareLooks>;

/**
 * The normalised density behind `jointRegion` (and, with `search`, behind `searchedRegion`) on disjoint cells in
 * order of position, at least three to σ: the 90 % area of these cells is the region's, to 1 %. Sky without a
 * cell has none. Parts that contradict each other are mixed, each group by the number of its parts.
 */
export function jointCells(shapes: Shape[], search: Search | null = null): CellColumns {
	if (shapes.length === 0) throw new RangeError('shapes is empty; it must hold at least one shape');
	const parts = prepareParts(canonicalOrder(shapes));
	const looks = search ? prepareLooks(search.reports, search.t0Ms, search.fade) : [];
	const found = cellsOf(parts, looks);
	// Reports that rule out everything contradict the region, which stays as it was.
	return found.left > 0 ? found.cells : cellsOf(parts, []).cells;
}

/** Normalised cells, and the chance before the reports that all of them find nothing. */
function cellsOf(parts: Part[], looks: Looks): { cells: CellColumns; left: number } {
	const map = parts.length === 1 ? parts[0]?.map : null;
	if (map && looks.length === 0) return { cells: columnsOfMap(map), left: 1 };
	const product = multiplyParts(parts);
	if (!product.agrees) return cellsApart(parts, looks);
	const densities = parts.map((part) => part.density);
	const mesh = product.kind === 'mesh' ? product.mesh : buildMesh(densities);
	if (looks.length === 0) return { cells: columnsOf(mesh.cells), left: 1 };
	const seen = searchedCells(mesh.cells, densities, looks);
	const left = seen.reduce(
		(sum, { order, density, survival }) => sum + density * survival * cellAreaSr(order),
		0
	);
	const survivors = seen.flatMap(({ order, pixel, at, density, survival }) =>
		survival > 0 ? [{ order, pixel, at, density: (density * survival) / left }] : []
	);
	return { cells: columnsOf(left > 0 ? survivors : mesh.cells), left };
}

function cellsApart(parts: Part[], looks: Looks): { cells: CellColumns; left: number } {
	const pieces = agreeingGroups(parts).map((group) => ({
		...cellsOf(group, looks),
		prior: group.length / parts.length
	}));
	const left = pieces.reduce((sum, piece) => sum + piece.prior * piece.left, 0);
	const weighted = pieces.map(({ cells, ...piece }) => ({
		cells,
		weight: left > 0 ? (piece.prior * piece.left) / left : piece.prior
	}));
	return { cells: mixedCells(weighted.filter(({ weight }) => weight > 0)), left };
}
