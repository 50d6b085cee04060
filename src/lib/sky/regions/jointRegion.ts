import type { Equatorial } from '../angle';

/**
 * Equal-probability-weighted sample of a region: `probability[i]` is the share of the whole
 * sphere's probability that point i stands for; the sum is `coverage` of the region (at least 0.97).
 */
export type RegionPoints = {
	raDeg: number[];
	decDeg: number[];
	probability: number[];
};

/** A set of sky pixels at HEALPix order 29, NESTED, as sorted disjoint half-open ranges. */
export type MocRanges = [start: bigint, end: bigint][];

/** Where the source can be, given every live part. */
export type JointRegion = {
	/** `closed`: all parts are Fisher; `mesh`: multi-order HEALPix cells; `none`: the parts do not overlap. */
	method: 'closed' | 'mesh' | 'none';
	centre: Equatorial;
	/** Standard deviation per axis of the equivalent Fisher density; null for a mesh. */
	sigmaDeg: number | null;
	area50Deg2: number;
	area90Deg2: number;
	/** Radius of the cap with the area of the 90 % region. */
	equivalentRadiusDeg: number;
	moc50: MocRanges;
	moc90: MocRanges;
	points: RegionPoints;
};
