/** Right ascension and declination, ICRS, degrees; `raDeg` in [0, 360), `decDeg` in [-90, 90]. */
export type Equatorial = { raDeg: number; decDeg: number };

/** Altitude above the geometric horizon and azimuth from north through east, degrees. */
export type Horizontal = { altDeg: number; azDeg: number };

/** Geodetic position on WGS84; longitude east-positive, degrees; height in metres. */
export type Site = { latDeg: number; lonDeg: number; heightM: number };

export const RAD_PER_DEG = Math.PI / 180;
export const DEG_PER_RAD = 180 / Math.PI;
/** Square degrees on the whole sphere. */
export const SKY_DEG2 = 4 * Math.PI * DEG_PER_RAD * DEG_PER_RAD;

/** Folds an angle into [0, 360) degrees. */
export function normaliseDeg(angleDeg: number): number {
	const folded = angleDeg % 360;
	const positive = folded < 0 ? folded + 360 : folded;
	return positive >= 360 ? 0 : positive;
}

/** Throws a RangeError that names argument, value and range unless `low <= value <= high`. */
export function requireInRange(name: string, value: number, low: number, high: number): void {
	if (!(value >= low && value <= high)) {
		throw new RangeError(`${name} is ${value}; it must be between ${low} and ${high}`);
	}
}
