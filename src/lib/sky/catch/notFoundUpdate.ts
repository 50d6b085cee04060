import type { FadeModel } from '../outlook/outlook';
import type { RegionPoints } from '../regions/jointRegion';
import { preparedField, tileAxes, tileContains, type Tile } from '../tiling/field';
import { toVector } from '../vector';
import type { Detector } from '../visibility/telescope';
import { detectChance } from './fade';

const DEFAULT_COMPLETENESS = 0.9;

/** A report of nothing down to `limitMag` in the detectors' footprint on each tile. */
export type NotFound = {
	tiles: Tile[];
	detectors: Detector[];
	limitMag: number;
	/** Middle of the exposure, UTC milliseconds. */
	atMs: number;
	/** Chance of noticing a source brighter than the limit, 0 to 1. */
	completeness?: number;
};

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
	const count = points.raDeg.length;
	const survival = new Float64Array(count).fill(1);
	const fainter = new Float64Array(count).fill(1);
	const looked = new Uint8Array(count);
	for (const report of reports) {
		const completeness = report.completeness ?? DEFAULT_COMPLETENESS;
		if (!(completeness >= 0 && completeness <= 1)) {
			throw new RangeError(`completeness is ${completeness}; it must be between 0 and 1`);
		}
		const chance = detectChance(fade, t0Ms, report.atMs, report.limitMag);
		for (const i of insideFootprint(points, report)) {
			survival[i] = survival[i]! * (1 - completeness * chance);
			fainter[i] = Math.min(fainter[i]!, 1 - chance);
			looked[i] = 1;
		}
	}
	const before = points.probability.reduce((sum, p) => sum + p, 0);
	let after = 0;
	let tooFaint = 0;
	let elsewhere = 0;
	points.probability.forEach((p, i) => {
		after += p * survival[i]!;
		if (looked[i] === 1) tooFaint += p * fainter[i]!;
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
			probability: points.probability.map((p, i) => p * survival[i]! * scale)
		},
		nothingChance: after / before,
		tooFaintChance: Math.min(1, tooFaint / after),
		elsewhereChance: Math.min(1, elsewhere / after)
	};
}

/** Indices of the points inside any tile of a report, each once. */
function insideFootprint(points: RegionPoints, report: NotFound): number[] {
	const field = preparedField(report.detectors);
	const axes = report.tiles.map(tileAxes);
	return points.raDeg.flatMap((raDeg, i) => {
		const { x, y, z } = toVector({ raDeg, decDeg: points.decDeg[i]! });
		return axes.some((tile) => tileContains(field, tile, x, y, z)) ? [i] : [];
	});
}
