import type { Equatorial } from '../angle';
import { deproject, toVector, type TangentPoint } from '../vector';
import type { Detector } from '../visibility/telescope';
import { fieldAreaDeg2 } from './field';
import { equidistant, type RegionSample } from './regionSample';

const MOST_SUBPOINTS = 64;
const MOST_SAMPLES = 12_000;
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
 * The region's points, each split into a spiral of equal parts when it stands for more than a quarter of the
 * smallest detector. When that makes too many, only the densest points, as far as `maxTiles` fields can reach.
 */
export function coveringSamples(
	region: RegionSample,
	detectors: readonly Detector[],
	maxTiles: number
): Samples {
	const smallest = Math.min(...detectors.map((detector) => fieldAreaDeg2([detector])));
	const partsOf = (index: number) =>
		Math.max(1, Math.min(MOST_SUBPOINTS, Math.ceil((4 * region.areaDeg2[index]!) / smallest)));
	let chosen = Array.from(region.byDensity, (index) => ({ index, parts: partsOf(index) }));
	if (chosen.reduce((sum, { parts }) => sum + parts, 0) > MOST_SAMPLES) {
		const reachableDeg2 = 3 * maxTiles * fieldAreaDeg2(detectors);
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
	const count = chosen.reduce((sum, { parts }) => sum + parts, 0);
	const samples: Samples = {
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
	let at = 0;
	chosen.forEach(({ index, parts }, k) => {
		const centre = region.positions[index]!;
		const radiusDeg = Math.sqrt(region.areaDeg2[index]! / Math.PI);
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
	return samples;
}

/** The region's points as they are; made once per region, as most fields need no splitting. */
function unsplit(region: RegionSample): Samples {
	const known = unsplitOf.get(region);
	if (known) return known;
	const core = new Uint8Array(region.count);
	for (let k = 0; k < region.coreCount; k += 1) core[region.byDensity[k]!] = 1;
	const { count, positions, plane, x, y, z, probability } = region;
	const parent = Int32Array.from({ length: count }, (_, i) => i);
	const samples = { count, positions, plane, x, y, z, probability, parent, core };
	unsplitOf.set(region, samples);
	return samples;
}

const unsplitOf = new WeakMap<RegionSample, Samples>();
