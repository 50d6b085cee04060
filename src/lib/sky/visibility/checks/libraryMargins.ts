import {
	Body,
	DefineStar,
	Equator,
	Horizon,
	Illumination,
	MakeTime,
	Observer
} from 'astronomy-engine';
import { normaliseDeg, RAD_PER_DEG } from '../../angle';
import { angleBetweenDeg } from '../../vector';
import { plain, type Case } from './awkwardCases';
import type { HorizonPoint } from '../telescope';

/** Margins by astronomy-engine's own star, Sun and Moon, degrees; all above 0 inside the limits. */
export function libraryMargins(one: Case, utcMs: number): { limit: string; margin: number }[] {
	const limits = { ...plain, ...one.limits };
	const time = MakeTime(new Date(utcMs));
	const observer = new Observer(one.site.latDeg, one.site.lonDeg, one.site.heightM);
	DefineStar(Body.Star1, one.position.raDeg / 15, one.position.decDeg, 100_000);
	const place = (body: Body) => {
		const { ra, dec, vec } = Equator(body, time, observer, true, true);
		const { altitude, azimuth } = Horizon(time, observer, ra, dec);
		return { ra, altitude, azimuth, vec };
	};
	const star = place(Body.Star1);
	const sun = place(Body.Sun);
	const moon = place(Body.Moon);
	const apart = (a: typeof star, b: typeof star) => {
		const unit = ({ x, y, z }: { x: number; y: number; z: number }) => {
			const length = Math.hypot(x, y, z);
			return { x: x / length, y: y / length, z: z / length };
		};
		return angleBetweenDeg(unit(a.vec), unit(b.vec));
	};
	const closed = (one.closures ?? []).some(
		({ startMs, endMs }) => utcMs >= startMs && utcMs < endMs
	);
	const moonLimitDeg = limits.moonDistanceDeg * Illumination(Body.Moon, time).phase_fraction;
	const siderealDeg = star.ra * 15 + hourAngleOf(star.altitude, star.azimuth, one.site.latDeg);
	const hourAngleDeg = normaliseDeg(siderealDeg - star.ra * 15 + 180) - 180;
	return [
		{ limit: 'sun', margin: limits.sunAltMaxDeg - sun.altitude },
		{ limit: 'altitude', margin: star.altitude - limits.minAltDeg },
		{ limit: 'zenith', margin: (limits.maxAltDeg ?? 91) - star.altitude },
		{ limit: 'horizon', margin: star.altitude - maskAltDeg(limits.horizon, star.azimuth) },
		{ limit: 'hourAngle', margin: (limits.hourAngleMaxH ?? 13) * 15 - Math.abs(hourAngleDeg) },
		{ limit: 'declination', margin: (limits.decMaxDeg ?? 91) - one.position.decDeg },
		{ limit: 'moon', margin: moon.altitude <= 0 ? 999 : apart(star, moon) - moonLimitDeg },
		{ limit: 'sunDistance', margin: apart(star, sun) - limits.sunDistanceDeg },
		{ limit: 'closure', margin: closed ? -999 : 999 }
	];
}

/** Hour angle from altitude and azimuth (Meeus, Astronomical Algorithms, chapter 13; from memory). */
function hourAngleOf(altDeg: number, azDeg: number, latDeg: number): number {
	const [alt, az, lat] = [altDeg * RAD_PER_DEG, azDeg * RAD_PER_DEG, latDeg * RAD_PER_DEG];
	return (
		Math.atan2(
			-Math.sin(az) * Math.cos(alt),
			Math.sin(alt) * Math.cos(lat) - Math.cos(alt) * Math.cos(az) * Math.sin(lat)
		) / RAD_PER_DEG
	);
}

function maskAltDeg(horizon: HorizonPoint[] | null, azDeg: number): number {
	if (!horizon) return -90;
	const around = [
		{ ...horizon.at(-1)!, azDeg: horizon.at(-1)!.azDeg - 360 },
		...horizon,
		{ ...horizon[0]!, azDeg: horizon[0]!.azDeg + 360 }
	];
	for (let i = 1; i < around.length; i += 1) {
		const [from, to] = [around[i - 1]!, around[i]!];
		if (azDeg < from.azDeg || azDeg > to.azDeg) continue;
		return (
			from.altDeg + ((to.altDeg - from.altDeg) * (azDeg - from.azDeg)) / (to.azDeg - from.azDeg)
		);
	}
	throw new Error('azimuth outside the mask');
}
