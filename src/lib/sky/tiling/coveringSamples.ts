import type { Equatorial } from '../angle';
import { deproject, toVector, type TangentPoint } from '../vector';
import type { Detector } from '../visibility/telescope';
import { fieldAreaDeg2 } from './field';
import { equidistant, type RegionSample } from './regionSample';

const MOST_SUBPOINTS = 200;
const MOST_SAMPLES = 12_000;
/** Parts of a point for every detector that its share of the sky would hold. */
const PARTS_PER_DETECTOR = 7;
const PARTS_WHEN_CUT = 4;
/** A disc holds the corners of the share of sky that its point stands for when it is wider by this. */
const TO_CORNERS = 1.12;
/** The same near the rim of the 90 % region, where neighbours lie unevenly. */
const OUTER_REACH = 1.5;
const OUTER_SHARE = 0.7;
const LEAST_OUTER_PARTS = 16;
const GOLDEN_ANGLE_RAD = Math.PI * (3 - Math.sqrt(5));

/** Positions to be covered: the region's points, split where they stand for more sky than a field. */
export type Samples = {
	count: number;
	positions: Equatorial[];
	/** On the equidistant plane about the region's middle. */
	plane: TangentPoint[];
	x: Float64Array;
	y: Float64Array;
	z: Float64Array;
	probability: Float64Array;
	parent: Int32Array;
	/** Must be covered: within the 90 % region. */
	core: Uint8Array;
};

/**
 * The region's points, each split into a spiral of equal parts when it stands for more than a seventh of the
 * smallest detector (a quarter where `maxTiles` cuts the tiling anyway), and the rim of the 90 % region. When that makes too many, only the densest points, as far as `maxTiles` fields can reach.
 */
export function coveringSamples(
	region: RegionSample,
	detectors: readonly Detector[],
	maxTiles: number
): Samples {
	const smallest = Math.min(...detectors.map((detector) => fieldAreaDeg2([detector])));
	const fieldDeg2 = fieldAreaDeg2(detectors);
	let coreDeg2 = 0;
	for (let k = 0; k < region.coreCount; k += 1) coreDeg2 += region.areaDeg2[region.byDensity[k]!]!;
	// Where the limit cuts the tiling anyway, nobody looks for holes at the rim.
	const isCut = coreDeg2 > 2 * maxTiles * fieldDeg2;
	const density = isCut ? PARTS_WHEN_CUT : PARTS_PER_DETECTOR;
	const isOuter = (rank: number) =>
		!isCut && rank > OUTER_SHARE * region.coreCount && rank < region.coreCount;
	const reachOf = (rank: number) => (isOuter(rank) ? OUTER_REACH : isCut ? 1 : TO_CORNERS);
	let chosen = Array.from(region.byDensity, (index, rank) => {
		const share = (density * reachOf(rank) ** 2 * region.areaDeg2[index]!) / smallest;
		// A point that stands for less than a part is left whole.
		const least = share > 1 && isOuter(rank) ? LEAST_OUTER_PARTS : 1;
		return { index, parts: Math.max(least, Math.min(MOST_SUBPOINTS, Math.ceil(share))) };
	});
	if (chosen.reduce((sum, { parts }) => sum + parts, 0) > MOST_SAMPLES) {
		const reachableDeg2 = 3 * maxTiles * fieldDeg2;
		let areaDeg2 = 0;
		const enough = chosen.findIndex(({ index }) => {
			areaDeg2 += region.areaDeg2[index]!;
			return areaDeg2 > reachableDeg2;
		});
		if (enough >= 0) chosen = chosen.slice(0, enough + 1);
	}
	if (chosen.length === region.count && chosen.every(({ parts }) => parts === 1)) {
		return unsplit(region);
	}
	const whole = chosen.length === region.count;
	const samples = emptySamples(
		chosen.reduce((sum, { parts }) => sum + parts, 0) + (whole ? region.rim.length : 0)
	);
	let at = 0;
	chosen.forEach(({ index, parts }, k) => {
		const centre = region.positions[index]!;
		const radiusDeg = reachOf(k) * Math.sqrt(region.areaDeg2[index]! / Math.PI);
		for (let part = 0; part < parts; part += 1, at += 1) {
			const spread = radiusDeg * Math.sqrt((part + 0.5) / parts);
			const position =
				parts === 1
					? centre
					: deproject(centre, {
							eastDeg: spread * Math.sin(part * GOLDEN_ANGLE_RAD),
							northDeg: spread * Math.cos(part * GOLDEN_ANGLE_RAD)
						});
			const vector = parts === 1 ? null : toVector(position);
			samples.positions.push(position);
			samples.plane.push(parts === 1 ? region.plane[index]! : equidistant(region.middle, position));
			samples.x[at] = vector?.x ?? region.x[index]!;
			samples.y[at] = vector?.y ?? region.y[index]!;
			samples.z[at] = vector?.z ?? region.z[index]!;
			samples.probability[at] = region.probability[index]! / parts;
			samples.parent[at] = index;
			samples.core[at] = k < region.coreCount ? 1 : 0;
		}
	});
	if (whole) addRim(samples, at, region);
	return samples;
}

function emptySamples(count: number): Samples {
	return {
		count,
		positions: [],
		plane: [],
		x: new Float64Array(count),
		y: new Float64Array(count),
		z: new Float64Array(count),
		probability: new Float64Array(count),
		parent: new Int32Array(count),
		core: new Uint8Array(count)
	};
}

/** The rim of the 90 % region as samples without probability of their own, from index `at` on. */
function addRim(samples: Samples, at: number, region: RegionSample): void {
	region.rim.forEach((position, k) => {
		const { x, y, z } = toVector(position);
		samples.positions.push(position);
		samples.plane.push(equidistant(region.middle, position));
		samples.x[at + k] = x;
		samples.y[at + k] = y;
		samples.z[at + k] = z;
		samples.core[at + k] = 1;
	});
}

/** The region's points as they are; made once per region, as most fields need no splitting. */
function unsplit(region: RegionSample): Samples {
	const known = unsplitOf.get(region);
	if (known) return known;
	const samples = emptySamples(region.count + region.rim.length);
	samples.positions.push(...region.positions);
	samples.plane.push(...region.plane);
	samples.x.set(region.x);
	samples.y.set(region.y);
	samples.z.set(region.z);
	samples.probability.set(region.probability);
	for (let i = 0; i < region.count; i += 1) samples.parent[i] = i;
	for (let k = 0; k < region.coreCount; k += 1) samples.core[region.byDensity[k]!] = 1;
	addRim(samples, region.count, region);
	unsplitOf.set(region, samples);
	return samples;
}

const unsplitOf = new WeakMap<RegionSample, Samples>();
