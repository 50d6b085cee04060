import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { CircularRecord, RecordedReport } from './circularRecord';
import { circularText } from './circularText';
import {
	angleInWords,
	areaInWords,
	elapsedInWords,
	oddsInWords,
	telescopeInWords
} from './plainWords';
import { wrapText } from './wrapText';

const limit: RecordedReport = {
	kind: 'limit',
	observerText: 'Cerro Almendra 1.5 m',
	filter: 'R',
	observedAt: new Date('2026-12-01T04:05:00Z'),
	exposureS: 300,
	magnitude: null,
	magnitudeError: null,
	limitMag: 20.61,
	position: null
};
const detection: RecordedReport = {
	...limit,
	kind: 'detection',
	observedAt: new Date('2026-12-01T06:41:27Z'),
	magnitude: 19.42,
	magnitudeError: 0.06,
	limitMag: null,
	position: { raDeg: 83.401, decDeg: -8.2008 }
};

const record: CircularRecord = {
	designation: 'D26L01-b',
	t0: new Date('2026-12-01T03:41:27Z'),
	now: new Date('2026-12-01T04:12:40Z'),
	retracted: false,
	alerts: [
		{
			streamName: 'Tambour',
			packetId: 'TB-20261201-0007',
			receivedAt: new Date('2026-12-01T03:41:49Z'),
			shape: {
				kind: 'circle',
				centre: { raDeg: 83.4, decDeg: -8.2 },
				radiusDeg: 3.1,
				containment: 0.9
			},
			significance: 8.1,
			live: true
		}
	],
	region: {
		centre: { raDeg: 83.401, decDeg: -8.2008 },
		alertCount: 2,
		area50Deg2: 0.0004,
		area90Deg2: 0.0014,
		equivalentRadiusDeg: 0.0213,
		logOddsAgreement: Math.log(14_000)
	},
	reports: [],
	next: [
		{
			telescopeText: 'Drakenskop 1 m',
			startAt: new Date('2026-12-01T18:00:00Z'),
			endAt: new Date('2026-12-01T20:00:00Z'),
			filter: 'R'
		}
	],
	author: { name: 'Ines Okafor', organisation: 'Duskline team', email: 'ines@example.org' }
};

describe('the draft of a circular', () => {
	it('says what, where, when and who in plain lines', () => {
		const { title, body } = circularText({ ...record, reports: [limit] });
		expect(title).toBe('D26L01-b: nothing found down to R > 20.6 (5 sigma)');
		expect(body).toBe(`Transient  D26L01-b
T0         2026-12-01 03:41:27 UTC
Written    2026-12-01 04:12 UTC, 31 min after T0

Alerts
- Tambour TB-20261201-0007, received 2026-12-01 03:41:49 UTC: circle of
  3.1 deg (90 %), significance 8.1

Position (ICRS), from 2 alerts
RA         05 33 36.2 (83.40100 deg)
Dec        -08 12 03 (-8.20080 deg)
Within     1.3 arcmin (90 %, 5.0 arcmin2; 50 %, 1.4 arcmin2)
Agreement  14 000 : 1 that the alerts have one source

Observed
- 2026-12-01 04:05 UTC (24 min after T0, mid-exposure), Cerro Almendra
  1.5 m, R > 20.6 (5 sigma) in 300 s

Observing next
- Drakenskop 1 m, 2026-12-01 18:00 UTC to 2026-12-01 20:00 UTC, filter R

Contact
- Ines Okafor, Duskline team, ines@example.org`);
	});

	it('leads with a detection, and gives its place', () => {
		const { title, body } = circularText({ ...record, reports: [limit, detection] });
		expect(title).toBe('D26L01-b: R = 19.42 +/- 0.06, 3.0 h after T0');
		expect(body.replace(/\n {2}/g, ' ')).toContain('at RA 05 33 36.24 Dec -08 12 02.9');
	});

	it('asks to stop when everything was withdrawn', () => {
		const { title, body } = circularText({ ...record, retracted: true });
		expect(title).toContain('retracted');
		expect(body.replace(/\n/g, ' ')).toContain('No more observations are needed.');
		expect(body).not.toContain('RA  ');
		expect(body).not.toContain('Observing next');
	});

	it('holds even without a region, a report or a claim', () => {
		const { title, body } = circularText({ ...record, region: null, next: [] });
		expect(title).toBe('D26L01-b: first report');
		expect(body).toContain('Nothing has been reported yet.');
		expect(body).toContain('Nobody has claimed a slot.');
	});

	it('never passes 72 columns, whatever names and remarks hold', () => {
		fc.assert(
			fc.property(fc.string({ maxLength: 200 }), fc.string({ maxLength: 90 }), (name, filter) => {
				const { body } = circularText({
					...record,
					reports: [{ ...limit, observerText: name, filter }],
					author: { ...record.author, organisation: name }
				});
				for (const line of body.split('\n')) expect([...line].length).toBeLessThanOrEqual(72);
			})
		);
	});
});

describe('wrapping', () => {
	it('loses no character but the spaces', () => {
		fc.assert(
			fc.property(
				fc.string({ unit: 'grapheme' }),
				fc.integer({ min: 8, max: 80 }),
				(text, columns) => {
					const lines = wrapText(text, columns, '  ');
					expect(lines.join('').replace(/\s/g, '')).toBe(text.replace(/\s/g, ''));
				}
			)
		);
	});
});

describe('plain words', () => {
	it.each([
		[2.84, '2.8 deg'],
		[0.999, '60 arcmin'],
		[0.0213, '1.3 arcmin'],
		[0.0008, '2.9 arcsec']
	])('writes an angle of %f deg as %s', (angle, words) => {
		expect(angleInWords(angle)).toBe(words);
	});
	it.each([
		[130.2, '130 deg2'],
		[0.0014, '5.0 arcmin2'],
		[1e-6, '13 arcsec2']
	])('writes an area of %f deg² as %s', (area, words) => {
		expect(areaInWords(area)).toBe(words);
	});
	it.each([
		[41_400, '41 s'],
		[-30_000, '-30 s'],
		[12 * 60_000, '12 min'],
		[100 * 60_000, '1.7 h'],
		[60 * 3_600_000, '2.5 d']
	])('writes %i ms as %s', (ms, words) => {
		expect(elapsedInWords(0, ms)).toBe(words);
	});
	it('names a telescope with its aperture once', () => {
		expect(telescopeInWords('Cerro Almendra', 1.5)).toBe('Cerro Almendra 1.5 m');
		expect(telescopeInWords('Cerro Almendra 1.5 m', 1.5)).toBe('Cerro Almendra 1.5 m');
	});
	it('turns odds round when they are against it, and keeps huge ones short', () => {
		expect(oddsInWords(Math.log(14_000))).toBe('14 000 : 1');
		expect(oddsInWords(-Math.log(20))).toBe('1 : 20');
		expect(oddsInWords(50)).toBe('10^21 : 1');
		expect(oddsInWords(2000)).toBe('10^868 : 1');
	});
});
