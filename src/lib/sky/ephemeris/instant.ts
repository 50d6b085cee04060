import { Body, HelioState, MakeTime, Rotation_EQJ_EQD, SiderealTime } from 'astronomy-engine';
import { RAD_PER_DEG, type Equatorial } from '../angle';
import { toVector, type Vector } from '../vector';

const AU_PER_DAY_AT_LIGHT_SPEED = 173.1446326846693;

/**
 * What every site shares at one instant: apparent sidereal time of Greenwich, precession and
 * nutation, and the Earth's velocity. UT1 is taken equal to UTC (at most 0.9 s, 14″ of hour angle).
 */
export type Instant = {
	utcMs: number;
	/** Greenwich apparent sidereal time, radians in [0, 2π). */
	gastRad: number;
	/** Row-major rotation from ICRS to the true equator and equinox of date (frame bias of 0.02″ left out). */
	toDate: readonly number[];
	/** Heliocentric velocity of the Earth in ICRS, units of the speed of light. */
	velocity: Vector;
};

/**
 * Precession (IAU 2006), nutation (IAU 2000B cut to its largest terms) and Earth velocity by
 * astronomy-engine. Dear: compute one per instant and share it.
 */
export function instantAt(utcMs: number): Instant {
	if (!Number.isFinite(utcMs)) {
		throw new RangeError(`utcMs is ${utcMs}; it must be a finite number of UTC milliseconds`);
	}
	const time = MakeTime(new Date(utcMs));
	const { rot } = Rotation_EQJ_EQD(time);
	const state = HelioState(Body.Earth, time);
	// The Sun's own 12 m/s about the barycentre would move a star by 0.01″ and is left out.
	return {
		utcMs,
		gastRad: SiderealTime(time) * 15 * RAD_PER_DEG,
		// astronomy-engine stores rotations by column.
		toDate: [0, 1, 2].flatMap((row) => [0, 1, 2].map((column) => rot[column]?.[row] ?? Number.NaN)),
		velocity: {
			x: state.vx / AU_PER_DAY_AT_LIGHT_SPEED,
			y: state.vy / AU_PER_DAY_AT_LIGHT_SPEED,
			z: state.vz / AU_PER_DAY_AT_LIGHT_SPEED
		}
	};
}

/** Turns a vector by a row-major 3 × 3 matrix. */
export function rotate(matrix: readonly number[], { x, y, z }: Vector): Vector {
	const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0, h = 0, i = 0] = matrix;
	return { x: a * x + b * y + c * z, y: d * x + e * y + f * z, z: g * x + h * y + i * z };
}

/** Turns a vector by the transpose (the inverse) of a row-major rotation. */
export function rotateBack(matrix: readonly number[], { x, y, z }: Vector): Vector {
	const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0, h = 0, i = 0] = matrix;
	return { x: a * x + d * y + g * z, y: b * x + e * y + h * z, z: c * x + f * y + i * z };
}

/**
 * Annual aberration of a unit vector for an observer moving at `velocity` (units of c); exact
 * special-relativistic form, result of unit length (Explanatory Supplement, 3rd ed., eq. 7.40; from memory).
 */
export function aberrate(direction: Vector, velocity: Vector): Vector {
	const speed2 = velocity.x * velocity.x + velocity.y * velocity.y + velocity.z * velocity.z;
	const inverseGamma = Math.sqrt(1 - speed2);
	const along = direction.x * velocity.x + direction.y * velocity.y + direction.z * velocity.z;
	const pull = 1 + along / (1 + inverseGamma);
	const scale = 1 / (1 + along);
	return {
		x: (inverseGamma * direction.x + pull * velocity.x) * scale,
		y: (inverseGamma * direction.y + pull * velocity.y) * scale,
		z: (inverseGamma * direction.z + pull * velocity.z) * scale
	};
}

/** Apparent unit vector of an ICRS position, true equator and equinox of date. */
export function apparentVector(position: Equatorial, instant: Instant): Vector {
	return rotate(instant.toDate, aberrate(toVector(position), instant.velocity));
}
