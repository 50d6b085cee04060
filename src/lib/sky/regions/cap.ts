import { RAD_PER_DEG, requireInRange, SKY_DEG2, type Equatorial } from '../angle';
import { separationDeg } from '../vector';

/** A spherical cap: all positions within `radiusDeg` of `centre`; radius 0 to 180. */
export type Cap = { centre: Equatorial; radiusDeg: number };

/** Area of a cap of `radiusDeg`, square degrees: 4π sin²(r/2), exact at arcseconds. */
export function capAreaDeg2(radiusDeg: number): number {
	requireInRange('radiusDeg', radiusDeg, 0, 180);
	return SKY_DEG2 * Math.sin((radiusDeg * RAD_PER_DEG) / 2) ** 2;
}

/** Radius of the cap with `areaDeg2` square degrees; inverse of `capAreaDeg2`. */
export function capRadiusDeg(areaDeg2: number): number {
	requireInRange('areaDeg2', areaDeg2, 0, SKY_DEG2 * (1 + 1e-12));
	return (2 * Math.asin(Math.min(1, Math.sqrt(areaDeg2 / SKY_DEG2)))) / RAD_PER_DEG;
}

/**
 * Area common to two caps, square degrees, to 1e-9 relative (1e-6 where they barely touch): the two
 * sectors less the two triangles between the centres and a crossing point, all by half-angle formulas
 * (spherical trigonometry: half-angle formulas and Girard's theorem), because the textbook closed form
 * loses every digit at arcseconds.
 */
export function capIntersectionDeg2(a: Cap, b: Cap): number {
	requireInRange('a.radiusDeg', a.radiusDeg, 0, 180);
	requireInRange('b.radiusDeg', b.radiusDeg, 0, 180);
	const distanceDeg = separationDeg(a.centre, b.centre);
	return intersectionDeg2(a.radiusDeg, b.radiusDeg, distanceDeg);
}

function intersectionDeg2(r1Deg: number, r2Deg: number, distanceDeg: number): number {
	if (distanceDeg >= r1Deg + r2Deg) return 0;
	if (distanceDeg <= Math.abs(r1Deg - r2Deg)) return capAreaDeg2(Math.min(r1Deg, r2Deg));
	// |A ∩ B| = |A| + |B| − sky + |A' ∩ B'|: past 180° in sum only the complements can be disjoint.
	if (r1Deg + r2Deg + distanceDeg >= 360) {
		return capAreaDeg2(r1Deg) + capAreaDeg2(r2Deg) - SKY_DEG2;
	}
	const r1 = r1Deg * RAD_PER_DEG;
	const r2 = r2Deg * RAD_PER_DEG;
	const s = ((r1Deg + r2Deg + distanceDeg) / 2) * RAD_PER_DEG;
	const s1 = ((r2Deg + distanceDeg - r1Deg) / 2) * RAD_PER_DEG;
	const s2 = ((r1Deg + distanceDeg - r2Deg) / 2) * RAD_PER_DEG;
	const s3 = ((r1Deg + r2Deg - distanceDeg) / 2) * RAD_PER_DEG;
	const [sinS, sin1, sin2, sin3] = [Math.sin(s), Math.sin(s1), Math.sin(s2), Math.sin(s3)];
	// Half the angles of the triangle (centre 1, centre 2, crossing): opposite r2, r1 and d.
	const half1 = Math.atan2(Math.sqrt(sin1 * sin3), Math.sqrt(sinS * sin2));
	const half2 = Math.atan2(Math.sqrt(sin2 * sin3), Math.sqrt(sinS * sin1));
	const triangleRad = 4 * lHuilierQuarterRad(s, s1, s2, s3);
	const sectors = 4 * half1 * 2 * Math.sin(r1 / 2) ** 2 + 4 * half2 * 2 * Math.sin(r2 / 2) ** 2;
	return ((sectors - 2 * triangleRad) * SKY_DEG2) / (4 * Math.PI);
}

/** A quarter of the spherical excess from half the perimeter and its differences (L'Huilier). */
function lHuilierQuarterRad(s: number, s1: number, s2: number, s3: number): number {
	const product = Math.tan(s / 2) * Math.tan(s1 / 2) * Math.tan(s2 / 2) * Math.tan(s3 / 2);
	return Math.atan(Math.sqrt(Math.max(0, product)));
}
