import { describe, expect, it } from 'vitest';
import { DEFAULT_FADE } from '../catch/fade';
import type { RegionPoints } from '../regions/jointRegion';
import { offset } from '../vector';
import type { TelescopeSpec } from '../visibility/telescope';
import { visibilityBetween } from '../visibility/visibilityOf';
import { computeOutlook } from './computeOutlook';
import type { OutlookInput } from './outlook';

const HOUR_MS = 3_600_000;
const NOW_MS = Date.UTC(2026, 11, 1, 4, 12, 40);
const CENTRE = { raDeg: 83.4, decDeg: -8.2 };

function disc(radiusDeg: number, count: number): RegionPoints {
	const places = Array.from({ length: count }, (_, i) =>
		offset(CENTRE, radiusDeg * Math.sqrt((i + 0.5) / count), (i * 137.50776405) % 360)
	);
	return {
		raDeg: places.map(({ raDeg }) => raDeg),
		decDeg: places.map(({ decDeg }) => decDeg),
		probability: places.map(() => 1 / count)
	};
}

function telescope(id: string, latDeg: number, lonDeg: number): TelescopeSpec {
	return {
		id,
		site: { latDeg, lonDeg, heightM: 2000 },
		limits: {
			sunAltMaxDeg: -12,
			minAltDeg: 25,
			maxAltDeg: null,
			horizon: null,
			hourAngleMaxH: null,
			decMinDeg: null,
			decMaxDeg: null,
			moonDistanceDeg: 20,
			sunDistanceDeg: 45
		},
		detectors: [
			{
				shape: 'rectangle',
				widthDeg: 1,
				heightDeg: 1,
				rotationDeg: 0,
				offsetXDeg: 0,
				offsetYDeg: 0
			}
		],
		depth: {
			filter: 'R',
			refLimitMag: 21,
			refExposureS: 60,
			floorMag: 23,
			extinctionMag: 0.1,
			darkSkyMag: 21.5
		},
		exposureS: 120,
		overheadS: 20,
		maxTiles: 30,
		closures: []
	};
}

const west = telescope('west', -30, -70);
const east = telescope('east', -31, 149);
const arctic = telescope('arctic', 78, 15);
const input = (change: Partial<OutlookInput> = {}): OutlookInput => ({
	nowMs: NOW_MS,
	spanHours: 24,
	t0Ms: NOW_MS - 31 * 60_000,
	centre: CENTRE,
	points: disc(0.4, 200),
	telescopes: [arctic, east, west],
	fade: DEFAULT_FADE,
	...change
});

describe('an outlook', () => {
	const outlook = computeOutlook(input());
	const row = (id: string) => outlook.rows.find(({ telescopeId }) => telescopeId === id)!;

	it('ranks the telescope that can start now above the one that has to wait', () => {
		expect(outlook.rows.map(({ telescopeId }) => telescopeId)).toEqual(['west', 'east', 'arctic']);
		expect(row('west').opensMs).toBeLessThanOrEqual(NOW_MS);
		expect(row('east').opensMs).toBeGreaterThan(NOW_MS);
		expect(row('west').catch).toBeGreaterThan(row('east').catch);
	});

	it('gives the windows of the centre when the region fits into one field', () => {
		const { startMs } = row('west').strip;
		const alone = visibilityBetween(west, CENTRE, startMs, NOW_MS + 24 * HOUR_MS);
		expect(row('west').windows).toHaveLength(alone.windows.length);
		row('west').windows.forEach((window, i) => {
			expect(Math.abs(window.startMs - alone.windows[i]!.startMs)).toBeLessThan(1000);
			expect(Math.abs(window.endMs - alone.windows[i]!.endMs)).toBeLessThan(1000);
		});
	});

	it('says why a telescope can not observe and gives it no plan', () => {
		expect(row('arctic').forbidden?.limit).toBe('altitude');
		expect(row('arctic')).toMatchObject({
			catch: 0,
			reach: 0,
			opensMs: null,
			plan: [],
			atOpening: null
		});
		// Culminates at 90 − 78 − 8.2 = 3.8 degrees, 21.2 short.
		expect(row('arctic').forbidden?.closestDeg).toBeCloseTo(21.2, 0);
	});

	it('starts the plan now, and reaches all of the region', () => {
		expect(row('west').plan[0]?.startMs).toBe(NOW_MS);
		expect(row('west').reach).toBeCloseTo(1, 9);
		expect(row('west').atOpening?.airmass).toBeLessThan(1.5);
	});

	it('draws 24 hours of strip from an hour and a half before the quarter hour', () => {
		const { strip } = row('west');
		expect(strip.startMs).toBe(Date.UTC(2026, 11, 1, 2, 30));
		expect(strip.altDeg).toHaveLength(97);
		expect(strip.bands[0]).toEqual({ startMs: strip.startMs, band: 'night' });
		expect(strip.bands.map(({ band }) => band)).toEqual([
			'night',
			'astronomical',
			'nautical',
			'civil',
			'day',
			'civil',
			'nautical',
			'astronomical',
			'night'
		]);
	});

	it('charges for waiting, and the network catches no less than its best telescope', () => {
		expect(outlook.networkCatch).toBeGreaterThanOrEqual(row('west').catch - 1e-9);
		expect(outlook.networkCatchLater).toBeLessThan(outlook.networkCatch);
		expect(outlook.costOfWaitingPoints).toBeCloseTo(
			100 * (outlook.networkCatch - outlook.networkCatchLater),
			9
		);
		expect(outlook.networkOrder[0]?.telescopeId).toBe('west');
	});

	it('charges for waiting what the network catches less when it starts an hour later', () => {
		// The same region, trigger, nights and fade, with the first start an hour later.
		const hourLater = computeOutlook(input({ nowMs: NOW_MS + HOUR_MS, spanHours: 23 }));
		expect(outlook.networkCatchLater).toBeCloseTo(hourLater.networkCatch, 6);
		expect(outlook.costOfWaitingPoints).toBeCloseTo(
			100 * (outlook.networkCatch - hourLater.networkCatch),
			4
		);
	});

	it('can be cloned into a worker thread and back', () => {
		expect(structuredClone(outlook)).toEqual(outlook);
		expect(computeOutlook(structuredClone(input()))).toEqual(outlook);
	});

	it('keeps plan, reach and catch within the region’s probability on a wide region', () => {
		const wide = computeOutlook(input({ points: disc(8, 1500) }));
		for (const { plan, catch: caught, reach } of wide.rows) {
			const held = plan.reduce((sum, tile) => sum + tile.probability, 0);
			expect(plan.length).toBeLessThanOrEqual(30);
			expect(held).toBeLessThanOrEqual(1 + 1e-9);
			expect(caught).toBeLessThanOrEqual(held);
			expect(reach).toBeLessThanOrEqual(1 + 1e-9);
			plan.forEach((tile, i) => {
				const before = plan[i - 1];
				if (before) expect(tile.startMs - before.startMs).toBeGreaterThanOrEqual(140_000);
			});
		}
		expect(wide.networkCatch).toBeGreaterThan(wide.rows[0]!.catch - 1e-9);
	});

	it('refuses a span out of range', () => {
		expect(() => computeOutlook(input({ spanHours: 100 }))).toThrow(/spanHours is 100/);
	});

	it('answers an empty network with nothing', () => {
		expect(computeOutlook(input({ telescopes: [] }))).toMatchObject({
			rows: [],
			networkCatch: 0,
			costOfWaitingPoints: 0
		});
	});
});
