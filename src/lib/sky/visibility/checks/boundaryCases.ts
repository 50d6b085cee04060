import type { HorizonPoint } from '../telescope';
import { at, site, summer, winter, type Case } from './observingCase';

const acrossNorth: HorizonPoint[] = [
	{ azDeg: 2, altDeg: 45 },
	{ azDeg: 8, altDeg: 10 },
	{ azDeg: 352, altDeg: 10 },
	{ azDeg: 358, altDeg: 45 }
];
const wall: HorizonPoint[] = [
	{ azDeg: 0, altDeg: 0 },
	{ azDeg: 100, altDeg: 0 },
	{ azDeg: 104, altDeg: 60 },
	{ azDeg: 140, altDeg: 60 },
	{ azDeg: 144, altDeg: 0 }
];
const closed = (from: string, to: string, reason: string) => ({
	startMs: Date.parse(from),
	endMs: Date.parse(to),
	reason
});

/** Edges where two limits meet, where one is only touched, or where a body moves slowly. */
export const boundaryCases: Case[] = [
	{ name: 'dark all day', site: site(84, 40), start: winter, position: at(200, 75) },
	{
		name: 'noon twilight in the polar night',
		site: site(78.2, 15.8),
		start: winter,
		position: at(123, 65)
	},
	{
		name: 'the Sun touches the limit at noon',
		site: site(80.157, 10),
		start: winter,
		position: at(123, 65)
	},
	{ name: 'polar day', site: site(78.2, 15.8), start: summer, position: at(123, 65) },
	{
		name: 'south pole with a wall',
		site: site(-90, 0, 2800),
		start: summer,
		position: at(40, -50),
		limits: { horizon: wall }
	},
	{
		name: 'a mask across north, on the dateline',
		site: site(52, 179.9999),
		start: winter,
		position: at(100, 70),
		limits: { horizon: acrossNorth }
	},
	{
		name: 'longitude 180 east',
		site: site(-17.5, 180),
		start: '2027-02-14T00:00:00Z',
		position: at(359.9999, -80)
	},
	{
		name: 'culminates arcseconds above the limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, 39.958)
	},
	{
		name: 'transits twice in the span',
		site: site(28.3, -16.5),
		start: '2026-12-01T00:00:00Z',
		position: at(53.5, 20),
		limits: { hourAngleMaxH: 0.5 }
	},
	{
		name: 'zenith gap on the equator',
		site: site(0, 36.8, 1800),
		start: '2026-12-01T12:00:00Z',
		position: at(75, 0.3),
		limits: { maxAltDeg: 85 }
	},
	{
		name: 'on the southern declination limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, -30),
		limits: { decMinDeg: -30 }
	},
	{
		name: 'south of the declination limit',
		site: site(-30, -70),
		start: winter,
		position: at(75, -30.0001),
		limits: { decMinDeg: -30 }
	},
	{
		name: 'closures that touch, and a short one',
		site: site(-30, -70),
		start: winter,
		position: at(75, -30),
		closures: [
			closed('2026-12-02T01:30:00Z', '2026-12-02T02:30:00Z', 'wind'),
			closed('2026-12-02T02:30:00Z', '2026-12-02T02:45:00Z', 'wind'),
			closed('2026-12-02T02:40:00Z', '2026-12-02T03:00:00Z', 'visitors'),
			closed('2026-12-02T04:00:00Z', '2026-12-02T04:00:30Z', 'test')
		]
	},
	{
		name: 'the Moon sets and frees the target',
		site: site(30, 10),
		start: '2026-12-17T12:00:00Z',
		position: at(20, 15),
		limits: { moonDistanceDeg: 60 }
	},
	{
		name: 'the Moon stays up all day',
		site: site(69.6, 19.2),
		start: '2026-12-22T12:00:00Z',
		position: at(92, 20),
		limits: { moonDistanceDeg: 15, minAltDeg: 10 }
	},
	{
		name: 'the Moon passes over the target',
		site: site(30, 10),
		start: '2026-12-24T12:00:00Z',
		position: at(107, 25.5),
		limits: { moonDistanceDeg: 2 }
	},
	{
		name: 'a new Moon is no obstacle',
		site: site(30, 10),
		start: '2026-12-08T12:00:00Z',
		position: at(240, 40),
		limits: { moonDistanceDeg: 60, minAltDeg: 5, sunAltMaxDeg: -6 }
	},
	{
		name: 'the Sun comes too close in the evening',
		site: site(10, 77),
		start: winter,
		position: at(293.9724, -13.8619),
		limits: { minAltDeg: 5, sunAltMaxDeg: -6 }
	},
	{
		name: 'every limit at once',
		site: site(-30, -70),
		start: '2026-12-23T12:00:00Z',
		position: at(95, -25),
		limits: {
			sunAltMaxDeg: -18,
			minAltDeg: 25,
			maxAltDeg: 84,
			horizon: wall,
			hourAngleMaxH: 4,
			decMinDeg: -60,
			decMaxDeg: 30,
			moonDistanceDeg: 50
		},
		closures: [closed('2026-12-24T04:00:00Z', '2026-12-24T05:10:07Z', 'visitors')]
	},
	{
		name: 'up only in daylight',
		site: site(30, 10),
		start: winter,
		position: at(200, -12),
		limits: { minAltDeg: 45, sunAltMaxDeg: -18, sunDistanceDeg: 20 }
	},
	{
		name: 'four days',
		site: site(-30, -70),
		start: winter,
		position: at(110, 5),
		hours: 96
	}
];
