import {
	DEG_PER_RAD,
	normaliseDeg,
	RAD_PER_DEG,
	requireInRange,
	type Horizontal,
	type Site
} from '../angle';
import type { Vector } from '../vector';

const EARTH_RADIUS_KM = 6378.137;
const FLATTENING = 1 / 298.257223563;

/** A site's fixed quantities: latitude, longitude and its distance from the Earth's axis and equator. */
export type SiteFrame = {
	lonRad: number;
	sinLat: number;
	cosLat: number;
	/** Distances from the axis and from the equatorial plane, kilometres (WGS84). */
	axisKm: number;
	equatorKm: number;
};

/** Throws a RangeError for a latitude, longitude or height out of range. */
export function siteFrame(site: Site): SiteFrame {
	requireInRange('latDeg', site.latDeg, -90, 90);
	requireInRange('lonDeg', site.lonDeg, -360, 360);
	requireInRange('heightM', site.heightM, -1000, 100_000);
	const latRad = site.latDeg * RAD_PER_DEG;
	const sinLat = Math.sin(latRad);
	const cosLat = Math.cos(latRad);
	const squash = (1 - FLATTENING) * (1 - FLATTENING);
	const c = 1 / Math.sqrt(cosLat * cosLat + squash * sinLat * sinLat);
	const heightKm = site.heightM / 1000;
	return {
		lonRad: site.lonDeg * RAD_PER_DEG,
		sinLat,
		cosLat,
		axisKm: (EARTH_RADIUS_KM * c + heightKm) * cosLat,
		equatorKm: (EARTH_RADIUS_KM * squash * c + heightKm) * sinLat
	};
}

/**
 * Altitude and azimuth (north through east) of a direction of date at local apparent sidereal time
 * `siderealRad`; no refraction. Azimuth is 0 at the zenith itself.
 */
export function toHorizontal(direction: Vector, frame: SiteFrame, siderealRad: number): Horizontal {
	const cosTheta = Math.cos(siderealRad);
	const sinTheta = Math.sin(siderealRad);
	const meridian = direction.x * cosTheta + direction.y * sinTheta;
	const east = direction.y * cosTheta - direction.x * sinTheta;
	const north = direction.z * frame.cosLat - meridian * frame.sinLat;
	const up = direction.z * frame.sinLat + meridian * frame.cosLat;
	return {
		altDeg: Math.atan2(up, Math.hypot(east, north)) * DEG_PER_RAD,
		azDeg: east === 0 && north === 0 ? 0 : normaliseDeg(Math.atan2(east, north) * DEG_PER_RAD)
	};
}

/** The site's own geocentric position of date, kilometres. */
export function observerKm(frame: SiteFrame, siderealRad: number): Vector {
	return {
		x: frame.axisKm * Math.cos(siderealRad),
		y: frame.axisKm * Math.sin(siderealRad),
		z: frame.equatorKm
	};
}
