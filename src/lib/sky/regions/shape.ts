import type { Equatorial } from '../angle';

/** A Gaussian error circle: `radiusDeg` holds the share `containment` (0 to 1) of the probability. */
export type CircleShape = {
	kind: 'circle';
	centre: Equatorial;
	radiusDeg: number;
	containment: number;
	/** Extra systematic error, one standard deviation per axis, added in quadrature; degrees. */
	systematicDeg?: number;
};

/** A circle with uniform density inside and none outside. */
export type HardCircleShape = { kind: 'hardCircle'; centre: Equatorial; radiusDeg: number };

/** A bivariate Gaussian on the tangent plane; position angle from north through east. */
export type EllipseShape = {
	kind: 'ellipse';
	centre: Equatorial;
	semiMajorDeg: number;
	semiMinorDeg: number;
	positionAngleDeg: number;
	containment: number;
};

/** A ring around `centre`, Gaussian across: `halfWidthDeg` either side of `radiusDeg` holds `containment`. */
export type AnnulusShape = {
	kind: 'annulus';
	centre: Equatorial;
	radiusDeg: number;
	halfWidthDeg: number;
	containment: number;
};

/** A spherical polygon with uniform density inside; vertices in order, great-circle edges. */
export type PolygonShape = { kind: 'polygon'; vertices: Equatorial[] };

/**
 * A probability map on multi-order HEALPix cells, NESTED, ICRS. `uniq` holds UNIQ numbers
 * (4·4^order + index), `density` the probability per steradian in each cell. Plain arrays, as it is kept as JSON;
 * maps in other orders, orderings and frames come to this form by `mapShapeFrom`.
 */
export type MapShape = { kind: 'map'; uniq: number[]; density: number[] };

/** Finest order of a flat map that is read: nside 2048, 50 million pixels. */
export const FLAT_ORDER_MAX = 11;

/** What one alert says about the position. */
export type Shape =
	CircleShape | HardCircleShape | EllipseShape | AnnulusShape | PolygonShape | MapShape;
