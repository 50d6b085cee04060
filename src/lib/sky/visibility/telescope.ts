import type { Site } from '../angle';

/** Azimuth and the lowest usable altitude there, degrees; interpolated linearly around the horizon. */
export type HorizonPoint = { azDeg: number; altDeg: number };

/** All a telescope's limits; null means that there is no such limit. */
export type TelescopeLimits = {
	/** The Sun must be below this altitude. */
	sunAltMaxDeg: number;
	minAltDeg: number;
	/** Zenith limit: the target must stay below this altitude. */
	maxAltDeg: number | null;
	/** Azimuth-ordered; taken together with `minAltDeg` (the higher of the two holds). */
	horizon: HorizonPoint[] | null;
	/** Greatest distance from the meridian, hours (equatorial mounts). */
	hourAngleMaxH: number | null;
	decMinDeg: number | null;
	decMaxDeg: number | null;
	/** Least distance to a full Moon above the horizon; scaled by the illuminated fraction. */
	moonDistanceDeg: number;
	/** Least distance to the Sun; a safety limit. */
	sunDistanceDeg: number;
};

/** One detector on the sky, offset from the pointing along x (east) and y (north) before rotation. */
export type Detector =
	| {
			shape: 'rectangle';
			widthDeg: number;
			heightDeg: number;
			rotationDeg: number;
			offsetXDeg: number;
			offsetYDeg: number;
	  }
	| { shape: 'circle'; radiusDeg: number; offsetXDeg: number; offsetYDeg: number };

/** How deep the telescope goes: the 5-sigma limit in one filter after a reference exposure at zenith. */
export type Depth = {
	filter: string;
	refLimitMag: number;
	refExposureS: number;
	/** Limit that no exposure passes (systematic floor). */
	floorMag: number;
	/** Extinction, magnitudes per airmass. */
	extinctionMag: number;
	/** Dark-sky brightness at zenith, magnitudes per square arcsecond. */
	darkSkyMag: number;
};

/** An unbroken stretch in which the site has closed the telescope; UTC milliseconds. */
export type Closure = { startMs: number; endMs: number; reason: string };

/** Everything the outlook needs to know of one telescope. */
export type TelescopeSpec = {
	id: string;
	site: Site;
	limits: TelescopeLimits;
	detectors: Detector[];
	depth: Depth;
	/** Exposure of one tile, seconds. */
	exposureS: number;
	/** Slew, settle and readout between two tiles, seconds. */
	overheadS: number;
	/** Most tiles that one plan may hold. */
	maxTiles: number;
	closures: Closure[];
};

/** The limit that opens, ends or forbids a window. `start` and `end` are the span's own. */
export type LimitName =
	| 'sun'
	| 'altitude'
	| 'horizon'
	| 'zenith'
	| 'hourAngle'
	| 'declination'
	| 'moon'
	| 'sunDistance'
	| 'closure'
	| 'start'
	| 'end';

/** An unbroken time in which the telescope can point at the position inside all its limits. */
export type Window = {
	startMs: number;
	endMs: number;
	opensBy: LimitName;
	endsBy: LimitName;
};

/** Why a telescope can't observe: the limit that forbids it and how close it comes. */
export type Forbidden = { limit: LimitName; closestDeg: number | null; atMs: number | null };

/** Answer for one position over one span; "no answer" is data. */
export type Visibility =
	| { verdict: 'alwaysUp'; windows: [Window] }
	| { verdict: 'windows'; windows: Window[] }
	| { verdict: 'neverUp'; windows: []; forbidden: Forbidden };
