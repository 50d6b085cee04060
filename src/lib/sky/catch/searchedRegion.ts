import type { FadeModel } from '../outlook/outlook';
import { cellAreaSr } from '../healpix/healpix';
import { canonicalOrder } from '../regions/canonicalOrder';
import { closedRegion } from '../regions/closedRegion';
import { jointRegion, mapAlone, type JointRegion } from '../regions/jointRegion';
import { keepApart } from '../regions/keepApart';
import { buildMesh, type MeshCell } from '../regions/mesh';
import { meshRegion } from '../regions/meshRegion';
import { agreeingGroups, multiplyParts, prepareParts, type Part } from '../regions/parts';
import type { Shape } from '../regions/shape';
import { prepareLooks, type Look, type NotFound } from './looks';
import { searchedCells, type SearchedCell } from './searchedCells';

/** Where all but this much of the probability keeps one factor, renormalising leaves the region as it was. */
const UNMOVED_SHARE = 1e-6;

/** A joint region after reports of nothing. */
export type SearchedRegion = {
	region: JointRegion;
	/** Chance before the reports that all of them find nothing. */
	nothingChance: number;
	/** Chance after the reports that the source is where somebody looked, but fainter than every limit there. */
	tooFaintChance: number;
	/** Chance after the reports that the source is where nobody looked. */
	elsewhereChance: number;
};

/** Sums over the prior: of the whole density, of what survives, and of the two ways to survive. */
type Tally = { nothing: number; tooFaint: number; elsewhere: number };

/**
 * The joint region of `shapes` (at least one) after reports of nothing, each of which multiplies the density in
 * its footprint by 1 − q · Pr(detect) (Bayesian search theory: Koopman 1946; Stone 1975). Areas and coverage
 * are the highest-density sets of the new density, on a mesh: areas to 1 %, chances to 0.001. A region that
 * lies wholly inside or outside every footprint is returned as `jointRegion` gives it. The order of shapes
 * and reports does not matter; leaving a report out undoes it.
 */
export function searchedRegion(
	shapes: Shape[],
	reports: readonly NotFound[],
	t0Ms: number,
	fade: FadeModel
): SearchedRegion {
	const looks = prepareLooks(reports, t0Ms, fade);
	if (looks.length === 0) {
		const region = jointRegion(shapes);
		return { region, nothingChance: 1, tooFaintChance: 0, elsewhereChance: 1 };
	}
	const { region, nothing, tooFaint, elsewhere } = searched(
		prepareParts(canonicalOrder(shapes)),
		looks
	);
	if (!(nothing > 0)) {
		// Everything was searched with certainty: the reports contradict the region, so it stays as it was.
		const whole = jointRegion(shapes);
		return { region: whole, nothingChance: 0, tooFaintChance: 0, elsewhereChance: 0 };
	}
	return {
		region,
		nothingChance: Math.min(1, nothing),
		tooFaintChance: Math.min(1, tooFaint / nothing),
		elsewhereChance: Math.min(1, elsewhere / nothing)
	};
}

function searched(parts: Part[], looks: Look[]): Tally & { region: JointRegion } {
	const product = multiplyParts(parts);
	if (!product.agrees) return searchedApart(parts, looks);
	const densities = parts.map((part) => part.density);
	const mesh = product.kind === 'mesh' ? product.mesh : buildMesh(densities);
	const cells = searchedCells(mesh.cells, densities, looks);
	const tally = tallyOf(cells);
	if (!(tally.nothing > 0) || isUnmoved(cells)) {
		const region =
			product.kind === 'fisher'
				? closedRegion(product)
				: (mapAlone(parts) ?? meshRegion(product.mesh.cells));
		return { ...tally, region };
	}
	return { ...tally, region: meshRegion(survivors(cells, tally.nothing)) };
}

/** Each group that stands apart is searched for itself, and weighs less the more of it was searched in vain. */
function searchedApart(parts: Part[], looks: Look[]): Tally & { region: JointRegion } {
	const pieces = agreeingGroups(parts).map((group) => ({
		...searched(group, looks),
		prior: group.length / parts.length
	}));
	const sum = (value: (piece: (typeof pieces)[number]) => number) =>
		pieces.reduce((total, piece) => total + piece.prior * value(piece), 0);
	const nothing = sum((piece) => piece.nothing);
	const left = pieces.map((piece) => ({
		region: piece.region,
		weight: nothing > 0 ? piece.prior * piece.nothing : piece.prior
	}));
	return {
		region: keepApart(left.filter(({ weight }) => weight > 0)),
		nothing,
		tooFaint: sum((piece) => piece.tooFaint),
		elsewhere: sum((piece) => piece.elsewhere)
	};
}

function tallyOf(cells: SearchedCell[]): Tally {
	const tally = { nothing: 0, tooFaint: 0, elsewhere: 0 };
	for (const cell of cells) {
		const probability = cell.density * cellAreaSr(cell.order);
		tally.nothing += probability * cell.survival;
		if (cell.looked) tally.tooFaint += probability * cell.fainter;
		else tally.elsewhere += probability;
	}
	return tally;
}

function isUnmoved(cells: SearchedCell[]): boolean {
	const held = new Map<number, number>();
	let total = 0;
	for (const { survival, density, order } of cells) {
		const probability = density * cellAreaSr(order);
		held.set(survival, (held.get(survival) ?? 0) + probability);
		total += probability;
	}
	return Math.max(...held.values()) > (1 - UNMOVED_SHARE) * total;
}

function survivors(cells: SearchedCell[], nothing: number): MeshCell[] {
	return cells.flatMap(({ order, pixel, at, density, survival }) => {
		const left = (density * survival) / nothing;
		return left > 0 ? [{ order, pixel, at, density: left }] : [];
	});
}
