import {
	Body,
	DefineStar,
	Equator,
	Horizon,
	Illumination,
	MakeTime,
	Observer
} from 'astronomy-engine';
import { describe, expect, it } from 'vitest';
import { normaliseDeg, RAD_PER_DEG, type Equatorial, type Site } from '../angle';
import { angleBetweenDeg } from '../vector';
import type { Closure, HorizonPoint, TelescopeLimits } from './telescope';
import { visibilityBetween } from './visibilityOf';

const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;
const ARCSEC = 1 / 3600;

const plain: TelescopeLimits = {
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
const chimney: HorizonPoint[] = [
	{ azDeg: 0, altDeg: 5 },
	{ azDeg: 119, altDeg: 5 },
	{ azDeg: 120, altDeg: 70 },
	{ azDeg: 121, altDeg: 70 },
	{ azDeg: 122, altDeg: 5 }
];
const slit: HorizonPoint[] = [
	{ azDeg: 0, altDeg: 85 },
	{ azDeg: 89.5, altDeg: 85 },
	{ azDeg: 90, altDeg: 10 },
	{ azDeg: 90.5, altDeg: 85 },
	{ azDeg: 359, altDeg: 85 }
];

type Case = {
	name: string;
	site: Site;
	start: string;
	position: Equatorial;
	limits?: Partial<TelescopeLimits>;
	closures?: Closure[];
};
const site = (latDeg: number, lonDeg: number, heightM = 1000): Site => ({
	latDeg,
	lonDeg,
	heightM
});
const at = (raDeg: number, decDeg: number): Equatorial => ({ raDeg, decDeg });
const winter = '2026-12-01T04:12:00Z';
const summer = '2027-06-21T09:00:00Z';

const cases: Case[] = [
	{ name: 'north pole in its winter', site: site(90, 0), start: winter, position: at(83, 60) },
	{ name: 'north pole in its summer', site: site(90, 0), start: summer, position: at(83, 60) },
	{ name: 'south pole, never set', site: site(-90, 45), start: summer, position: at(10, -72) },
	{
		name: 'south pole at equinox',
		site: site(-89.99, 45),
		start: '2027-04-04T00:00:00Z',
		position: at(200, -50),
		limits: { sunAltMaxDeg: -6 }
	},
	{
		name: 'polar twilight',
		site: site(69.6, 19.2),
		start: '2027-04-14T12:00:00Z',
		position: at(200, 50)
	},
	{
		name: 'a night of minutes',
		site: site(57.4, 11.9),
		start: '2027-05-13T12:00:00Z',
		position: at(250, 40)
	},
	{ name: 'dateline', site: site(-17.5, 179.999), start: winter, position: at(83.4, -8.2) },
	{
		name: 'dateline from the other side',
		site: site(52, -180),
		start: winter,
		position: at(359.999, 40)
	},
	{
		name: 'target at right ascension 0',
		site: site(28.3, -16.5),
		start: winter,
		position: at(0, 10)
	},
	{ name: 'target at the pole', site: site(28.3, -16.5), start: winter, position: at(0, 90) },
	{
		name: 'pole at its own altitude',
		site: site(20.001, -16.5),
		start: winter,
		position: at(123, 90),
		limits: { minAltDeg: 20 }
	},
	{
		name: 'culminates just above the limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, 39.995)
	},
	{
		name: 'culminates just below the limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, 40.005)
	},
	{
		name: 'passes the zenith with a gap',
		site: site(-30, -70),
		start: winter,
		position: at(75, -30),
		limits: { maxAltDeg: 88 }
	},
	{
		name: 'grazes the zenith limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, -27.99),
		limits: { maxAltDeg: 88 }
	},
	{
		name: 'a chimney in the way',
		site: site(-30, -70),
		start: winter,
		position: at(95, -35),
		limits: { horizon: chimney }
	},
	{
		name: 'a slit in the wall',
		site: site(35, 20),
		start: winter,
		position: at(120, 20),
		limits: { horizon: slit }
	},
	{
		name: 'two closures, one across the edge',
		site: site(-30, -70),
		start: winter,
		position: at(75, -30),
		closures: [
			{
				startMs: Date.parse('2026-12-01T01:00:00Z'),
				endMs: Date.parse('2026-12-01T05:00:00Z'),
				reason: 'wind'
			},
			{
				startMs: Date.parse('2026-12-02T01:30:30Z'),
				endMs: Date.parse('2026-12-02T02:30:30Z'),
				reason: 'visitors'
			}
		]
	},
	{
		name: 'closed all day',
		site: site(-30, -70),
		start: winter,
		position: at(75, -30),
		closures: [
			{
				startMs: Date.parse('2026-12-01T00:00:00Z'),
				endMs: Date.parse('2026-12-03T00:00:00Z'),
				reason: 'mirror'
			}
		]
	},
	{
		name: 'equatorial mount',
		site: site(20, -100),
		start: winter,
		position: at(60, 70),
		limits: { hourAngleMaxH: 3.5, decMaxDeg: 75 }
	},
	{
		name: 'hour angle past the lower culmination',
		site: site(65, 20),
		start: winter,
		position: at(60, 80),
		limits: { hourAngleMaxH: 11.5 }
	},
	{
		name: 'beyond the declination limit',
		site: site(20, -100),
		start: winter,
		position: at(60, 70),
		limits: { decMaxDeg: 60 }
	},
	{
		name: 'Moon rises into a half-lit limit',
		site: site(30, 10),
		start: winter,
		position: at(160, 20),
		limits: { moonDistanceDeg: 60 }
	},
	{
		name: 'full Moon passes by',
		site: site(30, 10),
		start: '2026-12-24T06:00:00Z',
		position: at(100, 30),
		limits: { moonDistanceDeg: 12 }
	},
	{
		name: 'near the Sun at dusk',
		site: site(0, 100),
		start: winter,
		position: at(291, -20),
		limits: { minAltDeg: 5, sunAltMaxDeg: -6 }
	},
	{
		name: 'crosses the Sun distance',
		site: site(78.2, 15.8),
		start: winter,
		position: at(247, 23.4),
		limits: { sunDistanceDeg: 45 }
	}
];

/** Margins by astronomy-engine's own star, Sun and Moon, degrees; all above 0 inside the limits. */
function margins(one: Case, utcMs: number): { limit: string; margin: number }[] {
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

const worst = (one: Case, utcMs: number) =>
	margins(one, utcMs).reduce((a, b) => (b.margin < a.margin ? b : a));

describe('windows against sampling with the library’s own star, Sun and Moon', () => {
	it.each(cases.map((one) => [one.name, one] as const))('%s', (_, one) => {
		const startMs = Date.parse(one.start);
		const endMs = startMs + DAY_MS;
		const answer = visibilityBetween(
			{ site: one.site, limits: { ...plain, ...one.limits }, closures: one.closures ?? [] },
			one.position,
			startMs,
			endMs
		);
		// Any missing or extra window of a minute or more holds one of these instants; edges are checked to a second below.
		for (let utcMs = startMs; utcMs <= endMs; utcMs += MINUTE_MS) {
			const inside = answer.windows.some((w) => utcMs >= w.startMs && utcMs <= w.endMs);
			const { margin } = worst(one, utcMs);
			if (Math.abs(margin) > 15 * ARCSEC) expect([utcMs, inside]).toEqual([utcMs, margin > 0]);
		}
		for (const window of answer.windows) {
			for (const [edgeMs, limit, outward] of [
				[window.startMs, window.opensBy, -1],
				[window.endMs, window.endsBy, 1]
			] as const) {
				if (limit === 'start' || limit === 'end') continue;
				// A second to either side of an edge the limit that is named holds, and is broken.
				const margin = (utcMs: number) =>
					margins(one, utcMs).find((entry) => entry.limit === limit)!.margin;
				expect(margin(edgeMs - outward * 1000)).toBeGreaterThan(-2 * ARCSEC);
				expect(margin(edgeMs + outward * 1000)).toBeLessThan(2 * ARCSEC);
			}
		}
		if (answer.verdict === 'neverUp') {
			const { limit, closestDeg } = answer.forbidden;
			const best = Math.max(
				...Array.from(
					{ length: 145 },
					(_, i) =>
						margins(one, startMs + i * 10 * MINUTE_MS).find((entry) => entry.limit === limit)!
							.margin
				)
			);
			// The limit named really is broken, and comes no closer than it says where it never holds.
			if (closestDeg !== null && best <= 0) expect(closestDeg).toBeLessThanOrEqual(-best + 0.01);
			if (best <= 0 && closestDeg !== null) expect(closestDeg).toBeGreaterThan(-best - 0.5);
		}
	});

	it('has cases that are always up, never up and up in pieces', () => {
		const verdicts = cases.map(
			(one) =>
				visibilityBetween(
					{ site: one.site, limits: { ...plain, ...one.limits }, closures: one.closures ?? [] },
					one.position,
					Date.parse(one.start),
					Date.parse(one.start) + DAY_MS
				).verdict
		);
		expect(new Set(verdicts)).toEqual(new Set(['alwaysUp', 'neverUp', 'windows']));
	});
});

describe('why a telescope can not observe', () => {
	const forbidden = (one: Omit<Case, 'name'>) => {
		const answer = visibilityBetween(
			{ site: one.site, limits: { ...plain, ...one.limits }, closures: one.closures ?? [] },
			one.position,
			Date.parse(one.start),
			Date.parse(one.start) + DAY_MS
		);
		if (answer.verdict !== 'neverUp') throw new Error(`expected neverUp, got ${answer.verdict}`);
		return answer.forbidden;
	};

	it('names the altitude and how far it falls short', () => {
		const answer = forbidden({ site: site(-30, -70), start: winter, position: at(75, 50) });
		expect(answer.limit).toBe('altitude');
		expect(answer.closestDeg).toBeCloseTo(10, 1);
	});

	it('names the Sun in polar day', () => {
		expect(forbidden({ site: site(78, 15), start: summer, position: at(250, 60) })).toMatchObject({
			limit: 'sun'
		});
	});

	it('names the declination with what is missing', () => {
		const answer = forbidden({
			site: site(20, -100),
			start: winter,
			position: at(60, 70),
			limits: { decMaxDeg: 60 }
		});
		expect(answer).toMatchObject({ limit: 'declination', closestDeg: 10 });
	});

	it('names a closure over the whole span', () => {
		expect(
			forbidden({
				site: site(-30, -70),
				start: winter,
				position: at(75, -30),
				closures: [{ startMs: 0, endMs: 4e12, reason: 'mirror' }]
			})
		).toMatchObject({ limit: 'closure', closestDeg: null });
	});

	it('names the limit that comes closest when each holds at some time', () => {
		// Up only in daylight.
		const answer = forbidden({
			site: site(30, 10),
			start: winter,
			position: at(200, -12),
			limits: { minAltDeg: 45, sunAltMaxDeg: -18, sunDistanceDeg: 20 }
		});
		expect(['altitude', 'sun']).toContain(answer.limit);
		expect(answer.closestDeg).toBeGreaterThan(0);
	});
});
