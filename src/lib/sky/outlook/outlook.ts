import type { Equatorial } from '../angle';
import type { TwilightBand } from '../ephemeris/lowSun';
import type { RegionPoints } from '../regions/jointRegion';
import type { Forbidden, TelescopeSpec, Window } from '../visibility/telescope';

/** m(t) = m1 + 2.5 alpha log10(t / 1 h), with m1 Gaussian. */
export type FadeModel = { m1Mean: number; m1Spread: number; alpha: number };

/** One planned pointing: `probability` of the joint region inside it, chance of a detection if the source is there. */
export type PlannedTile = {
	centre: Equatorial;
	rotationDeg: number;
	startMs: number;
	exposureS: number;
	probability: number;
	detectChance: number;
};

export type { TwilightBand } from '../ephemeris/lowSun';

/** What a night strip draws: the sky's bands and the target's altitude at even steps. */
export type Strip = {
	startMs: number;
	stepMinutes: number;
	/** Altitude of the region's centre, whole degrees, one per step, both ends included. */
	altDeg: number[];
	/** Band changes in order; the first starts at `startMs`. */
	bands: { startMs: number; band: TwilightBand }[];
};

export type OutlookRow = {
	telescopeId: string;
	/** Chance of detecting the fading counterpart with the tile plan, 0 to 1. */
	catch: number;
	/** Share of the region's probability observable in the windows, 0 to 1. */
	reach: number;
	/** Start of the first window that is open or still to come; null when there is none. */
	opensMs: number | null;
	windows: Window[];
	forbidden: Forbidden | null;
	/** At `max(now, opens)`, of the region's centre. Null when there is no window. */
	atOpening: {
		altDeg: number;
		azDeg: number;
		airmass: number;
		moonDistanceDeg: number;
		moonAltDeg: number;
		moonIlluminated: number;
		sunDistanceDeg: number;
		limitMag: number;
	} | null;
	plan: PlannedTile[];
	strip: Strip;
};

export type OutlookInput = {
	/** The instant from which starts are possible, UTC milliseconds. */
	nowMs: number;
	/** Length of the span looked at, hours. */
	spanHours: number;
	t0Ms: number;
	centre: Equatorial;
	points: RegionPoints;
	telescopes: TelescopeSpec[];
	fade: FadeModel;
};

export type Outlook = {
	computedMs: number;
	/** Ranked: greatest catch first, then earliest opening. */
	rows: OutlookRow[];
	networkCatch: number;
	/** The same with starts one hour later. */
	networkCatchLater: number;
	/** 100 × (networkCatch − networkCatchLater), points; never below 0. */
	costOfWaitingPoints: number;
	/** Telescopes in the order the greedy coverage picks them, with the catch each adds. */
	networkOrder: { telescopeId: string; gain: number }[];
};
