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
 * cell has none. Parts that contradict each other (`isApart`) are mixed, each group by the number of its parts:
 * the region is then the union of the groups' own areas, which is larger than the mixture's.
 */
export function jointCells(
	shapes: Shape[],
	search: Search | null = null
): { cells: CellColumns; isApart: boolean } {
	if (shapes.length === 0) throw new RangeError('shapes is empty; it must hold at least one shape');
	const parts = prepareParts(canonicalOrder(shapes));
	const looks = search ? prepareLooks(search.reports, search.t0Ms, search.fade) : [];
	const found = cellsOf(parts, looks);
	// Reports that rule out everything contradict the region, which stays as it was.
	const { cells, isApart } = found.left > 0 ? found : cellsOf(parts, []);
	return { cells, isApart };
}

type Found = {
	cells: CellColumns;
	/** Chance before the reports that all of them find nothing. */
	left: number;
	isApart: boolean;
};

function cellsOf(parts: Part[], looks: Looks): Found {
	const map = parts.length === 1 ? parts[0]?.map : null;
	if (map && looks.length === 0) return { cells: columnsOfMap(map), left: 1, isApart: false };
	const product = multiplyParts(parts);
	if (!product.agrees) return cellsApart(parts, looks);
	const densities = parts.map((part) => part.density);
	const mesh = product.kind === 'mesh' ? product.mesh : buildMesh(densities);
	if (looks.length === 0) return { cells: columnsOf(mesh.cells), left: 1, isApart: false };
	const seen = searchedCells(mesh.cells, densities, looks);
	const left = seen.reduce(
		(sum, { order, density, survival }) => sum + density * survival * cellAreaSr(order),
		0
	);
	const survivors = seen.flatMap(({ order, pixel, at, density, survival }) =>
		survival > 0 ? [{ order, pixel, at, density: (density * survival) / left }] : []
	);
	return { cells: columnsOf(left > 0 ? survivors : mesh.cells), left, isApart: false };
}

function cellsApart(parts: Part[], looks: Looks): Found {
	const pieces = agreeingGroups(parts).map((group) => ({
		...cellsOf(group, looks),
		prior: group.length / parts.length
	}));
	const left = pieces.reduce((sum, piece) => sum + piece.prior * piece.left, 0);
	const weighted = pieces.map(({ cells, ...piece }) => ({
		cells,
		weight: left > 0 ? (piece.prior * piece.left) / left : piece.prior
	}));
	return { cells: mixedCells(weighted.filter(({ weight }) => weight > 0)), left, isApart: true };
}
