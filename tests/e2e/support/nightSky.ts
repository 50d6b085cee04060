import { Body, EquatorFromVector, GeoVector, MakeTime } from 'astronomy-engine';
import { normaliseDeg, type Equatorial } from '../../../src/lib/sky/angle';
import { separationDeg } from '../../../src/lib/sky/vector';

/**
 * A position near the point opposite the Sun and away from the Moon: whatever the hour of the run, it
 * stands high where it is night, so that some telescope of the demo can point at it now.
 */
export function positionInTheNight(utcMs: number, decDeg: number): Equatorial {
	const time = MakeTime(new Date(utcMs));
	const sun = EquatorFromVector(GeoVector(Body.Sun, time, true));
	const moon = EquatorFromVector(GeoVector(Body.Moon, time, true));
	const moonPlace = { raDeg: normaliseDeg(moon.ra * 15), decDeg: moon.dec };
	const candidates = [0, 20, -20, 40, -40].map((offsetDeg) => ({
		raDeg: Number(normaliseDeg(sun.ra * 15 + 180 + offsetDeg).toFixed(4)),
		decDeg
	}));
	// Beyond 50 degrees the Moon forbids nothing: the candidate closest to midnight is as good as any.
	const clearance = (place: Equatorial) => Math.min(50, separationDeg(place, moonPlace));
	return candidates.reduce((best, place) => (clearance(place) > clearance(best) ? place : best));
}
