import type { FadeModel } from '../outlook/outlook';
import { preparedField, tileAxes, type Field, type Tile, type TileAxes } from '../tiling/field';
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

/** A report made ready: its footprint, and what it does to the density there. */
export type Look = {
	field: Field;
	axes: TileAxes[];
	/** 1 − q · Pr(detect): the factor on the density inside the footprint. */
	survival: number;
	/** Chance that the source is fainter than the limit at the time of the report. */
	fainter: number;
};

/** What all reports together say of one place. */
export type Verdict = { survival: number; fainter: number; looked: boolean };

/**
 * Prepares reports, sorted so that the order in which they came changes no digit. Those from before the
 * trigger say nothing of a source that began with it and are left out. Throws a RangeError for a bad completeness.
 */
export function prepareLooks(reports: readonly NotFound[], t0Ms: number, fade: FadeModel): Look[] {
	return reports
		.filter((report) => report.atMs >= t0Ms && report.tiles.length > 0)
		.map((report) => {
			const completeness = report.completeness ?? DEFAULT_COMPLETENESS;
			if (!(completeness >= 0 && completeness <= 1)) {
				throw new RangeError(`completeness is ${completeness}; it must be between 0 and 1`);
			}
			const chance = detectChance(fade, t0Ms, report.atMs, report.limitMag);
			return {
				field: preparedField(report.detectors),
				axes: report.tiles.map(tileAxes),
				survival: 1 - completeness * chance,
				fainter: 1 - chance
			};
		})
		.sort((a, b) => a.survival - b.survival || a.fainter - b.fainter);
}

/**
 * The verdict where exactly these `looks` (as sorted by `prepareLooks`) cover a place. The factors are
 * multiplied as if each report drew its own magnitude; the chance of being fainter than every limit is that
 * of the deepest one and never exceeds what is left.
 */
export function verdictOf(looks: readonly Look[]): Verdict {
	let survival = 1;
	let fainter = 1;
	for (const look of looks) {
		survival *= look.survival;
		fainter = Math.min(fainter, look.fainter);
	}
	return { survival, fainter: Math.min(fainter, survival), looked: looks.length > 0 };
}
