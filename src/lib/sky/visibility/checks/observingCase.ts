import type { Equatorial, Site } from '../../angle';
import type { Closure, TelescopeLimits } from '../telescope';

/** Limits of the awkward cases unless they say otherwise. */
export const plain: TelescopeLimits = {
	sunAltMaxDeg: -12,
	minAltDeg: 20,
	maxAltDeg: null,
	horizon: null,
	hourAngleMaxH: null,
	decMinDeg: null,
	decMaxDeg: null,
	moonDistanceDeg: 0,
	sunDistanceDeg: 45
};
/** A telescope, a position and 24 hours (unless `hours` says otherwise) that a careless engine gets wrong. */
export type Case = {
	name: string;
	site: Site;
	start: string;
	position: Equatorial;
	limits?: Partial<TelescopeLimits>;
	closures?: Closure[];
	hours?: number;
};
export const site = (latDeg: number, lonDeg: number, heightM = 1000): Site => ({
	latDeg,
	lonDeg,
	heightM
});
export const at = (raDeg: number, decDeg: number): Equatorial => ({ raDeg, decDeg });
export const winter = '2026-12-01T04:12:00Z';
export const summer = '2027-06-21T09:00:00Z';

/** The limits of a case, those it leaves out as in `plain`. */
export const limitsOf = (one: Case): TelescopeLimits => ({ ...plain, ...one.limits });
export const startMsOf = (one: Case): number => Date.parse(one.start);
export const endMsOf = (one: Case): number => startMsOf(one) + (one.hours ?? 24) * 3_600_000;
