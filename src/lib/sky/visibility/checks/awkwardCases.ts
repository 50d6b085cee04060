import { at, site, summer, winter, type Case } from './observingCase';
import type { HorizonPoint } from '../telescope';

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

/** Poles, dateline, culminations, masks, closures, mounts, Moon and Sun. */
export const awkwardCases: Case[] = [
	{ name: 'north pole in its winter', site: site(90, 0), start: winter, position: at(83, 60) },
	{ name: 'north pole in its summer', site: site(90, 0), start: summer, position: at(83, 60) },
	{ name: 'south pole, never set', site: site(-90, 45), start: summer, position: at(10, -72) },
	{
		name: 'south pole at equinox',
		site: site(-89.99, 45),
		start: '2027-04-05T00:00:00Z',
		position: at(200, -50),
		limits: { sunAltMaxDeg: -6 }
	},
	{
		name: 'polar twilight',
		site: site(69.863, 19.2),
		start: '2027-04-10T12:00:00Z',
		position: at(200, 50)
	},
	{
		name: 'a night of minutes',
		site: site(57.51, 11.9),
		start: '2027-05-22T12:00:00Z',
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
		position: at(75, 39.9544)
	},
	{
		name: 'culminates just below the limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, 39.9644)
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
		position: at(75, -28.045),
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
