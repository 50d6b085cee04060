import type { FadeModel } from '../outlook/outlook';
import type { RegionPoints } from '../regions/jointRegion';
import { tileContains } from '../tiling/field';
import { toVector } from '../vector';
import { prepareLooks, verdictOf, type NotFound } from './looks';

export type { NotFound } from './looks';

export type AfterLooking = {
	/** The region's points with their probability renormalised to the sum it had before. */
	points: RegionPoints;
	/** Chance before the reports that all of them find nothing. */
	nothingChance: number;
	/** Chance after the reports that the source is where somebody looked, but fainter than every limit there. */
	tooFaintChance: number;
	/** Chance after the reports that the source is where nobody looked. */
	elsewhereChance: number;
};

/**
 * The region after looking and not finding: each report multiplies the density in its footprint by
 * 1 − q · Pr(detect), then all is renormalised (Bayesian search theory: Koopman 1946; Stone 1975). Withdraw a
 * report by calling again without it; the order of reports does not matter.
 */
export function notFoundUpdate(
	points: RegionPoints,
	reports: readonly NotFound[],
	t0Ms: number,
	fade: FadeModel
): AfterLooking {
	const looks = prepareLooks(reports, t0Ms, fade);
	const verdicts = points.raDeg.map((raDeg, i) => {
		const { x, y, z } = toVector({ raDeg, decDeg: points.decDeg[i]! });
		return verdictOf(
			looks.filter(({ field, axes }) => axes.some((tile) => tileContains(field, tile, x, y, z)))
		);
	});
	const before = points.probability.reduce((sum, p) => sum + p, 0);
	let after = 0;
	let tooFaint = 0;
	let elsewhere = 0;
	points.probability.forEach((p, i) => {
		const { survival, fainter, looked } = verdicts[i]!;
		after += p * survival;
		if (looked) tooFaint += p * fainter;
		else elsewhere += p;
	});
	if (!(after > 0)) {
		// Everything was searched with certainty: the reports contradict the region, so it stays as it was.
		return { points, nothingChance: 0, tooFaintChance: 0, elsewhereChance: 0 };
	}
	const scale = before / after;
	return {
		points: {
			raDeg: points.raDeg,
			decDeg: points.decDeg,
			probability: points.probability.map((p, i) => p * verdicts[i]!.survival * scale)
		},
		nothingChance: after / before,
		tooFaintChance: Math.min(1, tooFaint / after),
		elsewhereChance: Math.min(1, elsewhere / after)
	};
}
