import { DEG_PER_RAD, RAD_PER_DEG, type Equatorial } from '../angle';
import type { RegionPoints } from '../regions/jointRegion';
import {
	offset,
	positionAngleDeg,
	separationDeg,
	toEquatorial,
	type TangentPoint
} from '../vector';

const NEIGHBOURS = 6;
/** A little past 90 %: the points know the rim of the 90 % region only so well, and it must not stay open. */
const COVERED_SHARE = 0.92;
/** Places looked at around a point for the rim of the 90 % region, and how deep in a neighbour they are dropped. */
const RIM_PLACES = 6;
const RIM_REACH = 1.12;
const RIM_OVERLAP = 1.25;

/** A region's points as unit vectors (ICRS), with the sky area that each stands for. */
export type RegionSample = {
	count: number;
	positions: Equatorial[];
	/** The points on the equidistant plane about `middle`. */
	plane: TangentPoint[];
	x: Float64Array;
	y: Float64Array;
	z: Float64Array;
	probability: Float64Array;
	/** Estimated from the six nearest points; too large at the rim. */
	areaDeg2: Float64Array;
	/** Indices from the densest point on. */
	byDensity: Int32Array;
	/** Points of the 90 % region: how many of `byDensity` from its start. */
	coreCount: number;
	/** Positions on the rim of the 90 % region. */
	rim: Equatorial[];
	total: number;
	/** Probability-weighted middle. */
	middle: Equatorial;
};

/** Prepares a region's points once for all telescopes; throws a RangeError when there is none or a weight is bad. */
export function regionSample(points: RegionPoints): RegionSample {
	const count = points.raDeg.length;
	if (count === 0 || points.decDeg.length !== count || points.probability.length !== count) {
		throw new RangeError(
			`points has ${count} raDeg, ${points.decDeg.length} decDeg and ${points.probability.length} probability; all must be equal and above 0`
		);
	}
	const x = new Float64Array(count);
	const y = new Float64Array(count);
	const z = new Float64Array(count);
	const probability = Float64Array.from(points.probability);
	const sum = { x: 0, y: 0, z: 0 };
	for (let i = 0; i < count; i += 1) {
		const raRad = points.raDeg[i]! * RAD_PER_DEG;
		const decRad = points.decDeg[i]! * RAD_PER_DEG;
		x[i] = Math.cos(decRad) * Math.cos(raRad);
		y[i] = Math.cos(decRad) * Math.sin(raRad);
		z[i] = Math.sin(decRad);
		const weight = probability[i]!;
		if (!(weight >= 0 && Number.isFinite(weight) && Number.isFinite(x[i]! + y[i]! + z[i]!))) {
			throw new RangeError(
				`points[${i}] has probability ${weight}; it must be 0 or above, with a finite position`
			);
		}
		sum.x += weight * x[i]!;
		sum.y += weight * y[i]!;
		sum.z += weight * z[i]!;
	}
	const total = probability.reduce((all, weight) => all + weight, 0);
	const { areaDeg2, nearest } = pointAreas(x, y, z);
	const byDensity = Int32Array.from({ length: count }, (_, i) => i).sort(
		(a, b) => probability[b]! / areaDeg2[b]! - probability[a]! / areaDeg2[a]! || a - b
	);
	let coreCount = 0;
	for (let held = 0; coreCount < count && held < COVERED_SHARE * total - 1e-12; coreCount += 1) {
		held += probability[byDensity[coreCount]!]!;
	}
	const length = Math.hypot(sum.x, sum.y, sum.z);
	const best = byDensity[0]!;
	const middle =
		length > 1e-6 * total
			? toEquatorial(sum)
			: { raDeg: points.raDeg[best]!, decDeg: points.decDeg[best]! };
	const positions = points.raDeg.map((raDeg, i) => ({ raDeg, decDeg: points.decDeg[i]! }));
	const plane = positions.map((position) => equidistant(middle, position));
	return {
		count,
		positions,
		plane,
		x,
		y,
		z,
		probability,
		areaDeg2,
		byDensity,
		coreCount,
		rim: rimOf(positions, areaDeg2, byDensity.subarray(0, coreCount), nearest),
		total,
		middle
	};
}

/**
 * Around every point of the 90 % region the rim of the disc that it stands for, as far as no neighbour of the
 * region holds it, and the middles between it and neighbours outside the region.
 */
function rimOf(
	positions: readonly Equatorial[],
	areaDeg2: Float64Array,
	core: Int32Array,
	nearest: Int32Array
): Equatorial[] {
	const isCore = new Uint8Array(positions.length);
	for (const i of core) isCore[i] = 1;
	const radiusDeg = (i: number) => Math.sqrt(areaDeg2[i]! / Math.PI);
	return Array.from(core).flatMap((i) => {
		const neighbours = Array.from(nearest.subarray(i * NEIGHBOURS, (i + 1) * NEIGHBOURS)).filter(
			(j) => j >= 0 && isCore[j] === 1
		);
		const [own, ownDeg] = [positions[i]!, RIM_REACH * radiusDeg(i)];
		const around = neighbours.map((j) => ({
			awayDeg: separationDeg(own, positions[j]!),
			directionRad: positionAngleDeg(own, positions[j]!) * RAD_PER_DEG,
			radiusDeg: radiusDeg(j)
		}));
		const between = Array.from(nearest.subarray(i * NEIGHBOURS, (i + 1) * NEIGHBOURS))
			.filter((j) => j >= 0 && isCore[j] === 0)
			.map((j) =>
				offset(own, separationDeg(own, positions[j]!) / 2, positionAngleDeg(own, positions[j]!))
			);
		const disc = Array.from({ length: RIM_PLACES }, (_, k) => (360 * k) / RIM_PLACES)
			.filter((angleDeg) => {
				const [x, y] = [
					ownDeg * Math.sin(angleDeg * RAD_PER_DEG),
					ownDeg * Math.cos(angleDeg * RAD_PER_DEG)
				];
				return !around.some(
					({ awayDeg, directionRad, radiusDeg: theirsDeg }) =>
						Math.hypot(x - awayDeg * Math.sin(directionRad), y - awayDeg * Math.cos(directionRad)) <
						RIM_OVERLAP * theirsDeg
				);
			})
			.map((angleDeg) => offset(own, ownDeg, angleDeg));
		return [...disc, ...between];
	});
}

/** Place on the equidistant plane about `middle`: true distance and direction from there. */
export function equidistant(middle: Equatorial, position: Equatorial): TangentPoint {
	const distanceDeg = separationDeg(middle, position);
	const angleRad = positionAngleDeg(middle, position) * RAD_PER_DEG;
	return { eastDeg: distanceDeg * Math.sin(angleRad), northDeg: distanceDeg * Math.cos(angleRad) };
}

/**
 * Area per point, square degrees (a disc to the sixth nearest point holds six points' areas), and the six nearest
 * points of each, −1 where there are fewer.
 */
function pointAreas(
	x: Float64Array,
	y: Float64Array,
	z: Float64Array
): { areaDeg2: Float64Array; nearest: Int32Array } {
	const count = x.length;
	const neighbours = Math.min(NEIGHBOURS, count - 1);
	const areaDeg2 = new Float64Array(count);
	const nearest = new Int32Array(count * NEIGHBOURS).fill(-1);
	if (neighbours === 0) return { areaDeg2: areaDeg2.fill(1e-9), nearest };
	const chords2 = new Float64Array(neighbours);
	for (let i = 0; i < count; i += 1) {
		const first = i * NEIGHBOURS;
		chords2.fill(Infinity);
		const [xi, yi, zi] = [x[i]!, y[i]!, z[i]!];
		let farthest = Infinity;
		for (let j = 0; j < count; j += 1) {
			const dx = x[j]! - xi;
			const dy = y[j]! - yi;
			const dz = z[j]! - zi;
			const chord2 = dx * dx + dy * dy + dz * dz;
			if (chord2 >= farthest || j === i) continue;
			let slot = neighbours - 1;
			while (slot > 0 && chords2[slot - 1]! > chord2) {
				chords2[slot] = chords2[slot - 1]!;
				nearest[first + slot] = nearest[first + slot - 1]!;
				slot -= 1;
			}
			chords2[slot] = chord2;
			nearest[first + slot] = j;
			farthest = chords2[neighbours - 1]!;
		}
		// π·chord² is the exact area of a cap of that chord.
		areaDeg2[i] = Math.max(1e-12, (Math.PI * farthest * DEG_PER_RAD * DEG_PER_RAD) / neighbours);
	}
	return { areaDeg2, nearest };
}
