import { RAD_PER_DEG, type Equatorial, type Site } from '../angle';
import { toVector, type Vector } from '../vector';
import { aberrate, instantAt, rotateBack, type Instant } from './instant';

const BLOCK_MS = 6 * 3_600_000;

/** Sines for distances and thresholds, degrees for people. */
export type AltitudeUnit = 'sine' | 'degrees';

/** Prepares the instants of a grid, to be shared by all sites; UTC milliseconds in ascending order. */
export function gridInstants(utcMs: readonly number[]): Instant[] {
	utcMs.forEach((value, i) => {
		const before = utcMs[i - 1];
		if (before !== undefined && value < before) {
			throw new RangeError(`utcMs[${i}] is ${value}; times must ascend from ${before}`);
		}
	});
	return utcMs.map(instantAt);
}

/**
 * Altitudes of many ICRS positions at many instants from one site, without refraction, written to
 * `out[position × instants + instant]` and returned. Sines or degrees; within 1″ of astropy (Float32Array
 * rounds degrees to 0.03″). Nutation is taken per instant, aberration per position and 6 h (0.05″).
 */
export function altitudeGrid<Output extends Float32Array | Float64Array>(
	positions: readonly Equatorial[],
	instants: readonly Instant[],
	site: Site,
	unit: AltitudeUnit,
	out: Output
): Output {
	const count = instants.length;
	if (out.length < positions.length * count) {
		throw new RangeError(
			`out has ${out.length} elements; it must have at least ${positions.length * count}`
		);
	}
	const zenith = zenithVectors(instants, site);
	const fill = unit === 'sine' ? fillSines : fillDegrees;
	const vectors = positions.map(toVector);
	for (let first = 0; first < count;) {
		const end = blockEnd(instants, first);
		const { velocity } = instants[(first + end) >> 1]!;
		vectors.forEach((vector, i) => {
			const apparent = aberrate(vector, velocity);
			fill(out, i * count, zenith, apparent, first, end);
		});
		first = end;
	}
	return out;
}

/** One past the last instant within 6 h of the instant at `first`. */
function blockEnd(instants: readonly Instant[], first: number): number {
	const limitMs = instants[first]!.utcMs + BLOCK_MS;
	let end = first + 1;
	while (end < instants.length && instants[end]!.utcMs < limitMs) end += 1;
	return end;
}

/** The site's zenith at each instant, turned into ICRS so that positions need no rotation. */
function zenithVectors(instants: readonly Instant[], site: Site) {
	const latRad = site.latDeg * RAD_PER_DEG;
	const lonRad = site.lonDeg * RAD_PER_DEG;
	const cosLat = Math.cos(latRad);
	const sinLat = Math.sin(latRad);
	const x = new Float64Array(instants.length);
	const y = new Float64Array(instants.length);
	const z = new Float64Array(instants.length);
	instants.forEach(({ gastRad, toDate }, i) => {
		const siderealRad = gastRad + lonRad;
		const turned = rotateBack(toDate, {
			x: cosLat * Math.cos(siderealRad),
			y: cosLat * Math.sin(siderealRad),
			z: sinLat
		});
		x[i] = turned.x;
		y[i] = turned.y;
		z[i] = turned.z;
	});
	return { x, y, z };
}

function fillSines(
	out: Float32Array | Float64Array,
	offset: number,
	zenith: { x: Float64Array; y: Float64Array; z: Float64Array },
	direction: Vector,
	first: number,
	end: number
): void {
	const { x, y, z } = direction;
	const { x: zx, y: zy, z: zz } = zenith;
	for (let i = first; i < end; i += 1) {
		out[offset + i] = x * zx[i]! + y * zy[i]! + z * zz[i]!;
	}
}

/**
 * asin(s) = π/2 − √(1−s)·P(s), P of degree 7, |error| ≤ 2e-8 rad = 0.004″ (Abramowitz & Stegun 1964,
 * eq. 4.4.46); several times faster than Math.asin. Kept in the loop so that the sine keeps all its digits.
 */
function fillDegrees(
	out: Float32Array | Float64Array,
	offset: number,
	zenith: { x: Float64Array; y: Float64Array; z: Float64Array },
	direction: Vector,
	first: number,
	end: number
): void {
	const { x, y, z } = direction;
	const { x: zx, y: zy, z: zz } = zenith;
	const degPerRad = 180 / Math.PI;
	for (let i = first; i < end; i += 1) {
		const sine = x * zx[i]! + y * zy[i]! + z * zz[i]!;
		const s = Math.min(Math.abs(sine), 1);
		const p =
			1.570796305 +
			s *
				(-0.2145988016 +
					s *
						(0.0889789874 +
							s *
								(-0.0501743046 +
									s *
										(0.030891881 + s * (-0.0170881256 + s * (0.0066700901 - s * 0.0012624911))))));
		const magnitude = 90 - Math.sqrt(1 - s) * p * degPerRad;
		out[offset + i] = sine < 0 ? -magnitude : magnitude;
	}
}
