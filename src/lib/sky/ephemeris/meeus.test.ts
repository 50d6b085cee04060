import { describe, expect, it } from 'vitest';
import { DEG_PER_RAD, normaliseDeg, RAD_PER_DEG, type Equatorial } from '../angle';
import { toEquatorial, toVector, type Vector } from '../vector';
import { aberrate, apparentVector, instantAt, rotate, rotateBack } from './instant';
import { lowSun } from './lowSun';
import { siteFrame, toHorizontal } from './siteFrame';
import { illuminatedFraction, skyAt } from './sunMoon';

const ARCSEC = 1 / 3600;

/** Degrees from degrees (or hours), minutes and seconds. */
const sexagesimal = (whole: number, minutes: number, seconds: number) =>
	whole + minutes / 60 + seconds / 3600;

/** How far two positions are apart along RA (coordinate difference, not on the sky) and Dec, arcseconds. */
const apartArcsec = (a: Equatorial, b: Equatorial) => ({
	ra: (a.raDeg - b.raDeg) / ARCSEC,
	dec: (a.decDeg - b.decDeg) / ARCSEC
});

describe('worked examples of Meeus, Astronomical Algorithms, 2nd ed. (values from memory)', () => {
	const april10Ms = Date.UTC(1987, 3, 10);

	it('example 12.a: apparent sidereal time at Greenwich, 1987 April 10, 0h UT is 13h 10m 46.1351s', () => {
		const gastS = instantAt(april10Ms).gastRad * DEG_PER_RAD * 240;
		expect(Math.abs(gastS - sexagesimal(13, 10, 46.1351) * 3600)).toBeLessThan(0.02);
	});

	it('example 12.b: mean sidereal time, 1987 April 10, 19h 21m UT is 8h 34m 57.0896s', () => {
		const instantMs = april10Ms + sexagesimal(19, 21, 0) * 3_600_000;
		const gastS = instantAt(instantMs).gastRad * DEG_PER_RAD * 240;
		// Apparent less mean is −0.2317 s that day (example 12.a: 46.1351 s and 46.3668 s).
		expect(Math.abs(gastS + 0.2317 - sexagesimal(8, 34, 57.0896) * 3600)).toBeLessThan(0.02);
	});

	it('example 13.b: Venus over Washington, 1987 April 10, 19h 21m UT: azimuth 68.0337° from south, altitude 15.1249°', () => {
		const place = {
			raDeg: 15 * sexagesimal(23, 9, 16.641),
			decDeg: -sexagesimal(6, 43, 11.61)
		};
		const frame = siteFrame({
			latDeg: sexagesimal(38, 55, 17),
			lonDeg: -sexagesimal(77, 3, 56),
			heightM: 0
		});
		const { gastRad } = instantAt(april10Ms + sexagesimal(19, 21, 0) * 3_600_000);
		const { altDeg, azDeg } = toHorizontal(toVector(place), frame, gastRad + frame.lonRad);
		expect(Math.abs(altDeg - 15.1249)).toBeLessThan(0.0001);
		expect(Math.abs(normaliseDeg(azDeg - 180) - 68.0337)).toBeLessThan(0.0001);
	});

	describe('θ Persei on 2028 November 13.19 TD', () => {
		// 13.19 TD, less the 75 s or so by which TD runs ahead: 0.01″ of aberration at most.
		const instant = instantAt(Date.UTC(2028, 10, 13) + 0.19 * 86_400_000 - 75_000);
		// Mean place of J2000.0 with the proper motion up to the date.
		const star = { raDeg: 41.054063, decDeg: 49.22775 };
		const unaberrated = toEquatorial(rotate(instant.toDate, toVector(star)));

		it('example 21.b: precession takes it to 41.547214°, +49.348483°', () => {
			// The rotation holds nutation too, which example 23.a puts at +15.843″ and +6.218″.
			const apart = apartArcsec(unaberrated, { raDeg: 41.547214, decDeg: 49.348483 });
			expect(Math.abs(apart.ra - 15.843)).toBeLessThan(0.1);
			expect(Math.abs(apart.dec - 6.218)).toBeLessThan(0.1);
		});

		it('example 23.a: aberration moves it by +30.045″ and +6.697″, to 2h 46m 14.390s, +49° 21′ 07.45″', () => {
			const apparent = toEquatorial(apparentVector(star, instant));
			const moved = apartArcsec(apparent, unaberrated);
			expect(Math.abs(moved.ra - 30.045)).toBeLessThan(0.05);
			expect(Math.abs(moved.dec - 6.697)).toBeLessThan(0.05);
			const apart = apartArcsec(apparent, {
				raDeg: 15 * sexagesimal(2, 46, 14.39),
				decDeg: sexagesimal(49, 21, 7.45)
			});
			expect(Math.abs(apart.ra)).toBeLessThan(0.1);
			expect(Math.abs(apart.dec)).toBeLessThan(0.1);
			expect(aberrate(toVector(star), instant.velocity)).not.toEqual(toVector(star));
		});
	});

	it('example 22.a: nutation on 1987 April 10, 0h TD is −3.788″ in longitude, +9.443″ in obliquity', () => {
		// 0h TD is 55.8 s before 0h UT in 1987.
		const { toDate } = instantAt(april10Ms - 55_800);
		const obliquityRad = sexagesimal(23, 26, 27.407) * RAD_PER_DEG;
		// The mean equator's frame, by Meeus's own precession (eq. 21.3, 21.4), seen in the true one.
		const inTrueFrame = (mean: Vector) => rotate(toDate, meanToJ2000(mean, -0.127296372348));
		const pole = inTrueFrame({ x: 0, y: 0, z: 1 });
		const equinox = inTrueFrame({ x: 1, y: 0, z: 0 });
		// N₂₁ = Δψ cos ε, N₃₁ = Δψ sin ε, N₂₃ = −Δε for small angles. Precession of 2006 and of Meeus part by 0.04″ here, nutation by 0.05″.
		const arcsec = (part: number) => (part * DEG_PER_RAD) / ARCSEC;
		expect(Math.abs(arcsec(equinox.y) + 3.788 * Math.cos(obliquityRad))).toBeLessThan(0.15);
		expect(Math.abs(arcsec(equinox.z) + 3.788 * Math.sin(obliquityRad))).toBeLessThan(0.1);
		expect(Math.abs(arcsec(-pole.y) - 9.443)).toBeLessThan(0.1);
	});

	it('example 25.a: the Sun on 1992 October 13, 0h TD is at 13h 13m 31.4s, −7° 47′ 06″', () => {
		const utcMs = Date.UTC(1992, 9, 13) - 59_000;
		const sun = lowSun(utcMs);
		expect(Math.abs(sun.decDeg + sexagesimal(7, 47, 6))).toBeLessThan(0.01);
		const siderealDeg = instantAt(utcMs).gastRad * DEG_PER_RAD;
		const raDeg = normaliseDeg(siderealDeg - sun.greenwichHourAngleDeg);
		expect(Math.abs(raDeg - 15 * sexagesimal(13, 13, 31.4))).toBeLessThan(0.02);
	});

	it('example 48.a: the Moon on 1992 April 12, 0h TD has phase angle 69.0756 and fraction 0.6786', () => {
		expect(illuminatedFraction(69.0756)).toBeCloseTo(0.6786, 4);
		// 0h TD is 58.3 s before 0h UT in 1992.
		const sky = skyAt({ latDeg: 0, lonDeg: 0, heightM: 0 }, Date.UTC(1992, 3, 12) - 58_300, {
			raDeg: 0,
			decDeg: 0
		});
		expect(Math.abs(sky.moonIlluminated - 0.6786)).toBeLessThan(0.0005);
	});
});

/** From the mean equator and equinox at `centuries` since J2000.0 to those of J2000.0 (Meeus, eq. 21.3). */
function meanToJ2000(mean: Vector, centuries: number): Vector {
	const t = centuries;
	const zeta = (2306.2181 * t + 0.30188 * t * t + 0.017998 * t ** 3) * ARCSEC * RAD_PER_DEG;
	const z = (2306.2181 * t + 1.09468 * t * t + 0.018203 * t ** 3) * ARCSEC * RAD_PER_DEG;
	const theta = (2004.3109 * t - 0.42665 * t * t - 0.041833 * t ** 3) * ARCSEC * RAD_PER_DEG;
	const [cosZeta, sinZeta] = [Math.cos(zeta), Math.sin(zeta)];
	const [cosZ, sinZ] = [Math.cos(z), Math.sin(z)];
	const [cosTheta, sinTheta] = [Math.cos(theta), Math.sin(theta)];
	const precession = [
		cosZeta * cosTheta * cosZ - sinZeta * sinZ,
		-sinZeta * cosTheta * cosZ - cosZeta * sinZ,
		-sinTheta * cosZ,
		cosZeta * cosTheta * sinZ + sinZeta * cosZ,
		-sinZeta * cosTheta * sinZ + cosZeta * cosZ,
		-sinTheta * sinZ,
		cosZeta * sinTheta,
		-sinZeta * sinTheta,
		cosTheta
	];
	return rotateBack(precession, mean);
}
