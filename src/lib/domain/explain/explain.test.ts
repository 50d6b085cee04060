import { describe, expect, it } from 'vitest';
import { computeOutlook } from '../../sky/outlook/computeOutlook';
import type { TelescopeSpec } from '../../sky/visibility/telescope';
import { jointRegion } from '../../sky/regions/jointRegion';
import type { Shape } from '../../sky/regions/shape';
import type { BoardOutlook, BoardTelescope, BoardTransient } from '../board';
import { formatArea, formatChance, formatOdds, formatShare } from '../quantity';
import type { Explanation } from './explanation';
import { explainCostOfWaiting, explainNetworkCatch } from './explainNetwork';
import { explainAgreement, explainArea, explainCentre } from './explainRegion';
import { explainRow } from './explainTelescope';

const T0 = '2026-12-01T03:41:27.000Z';
const NOW_MS = Date.parse('2026-12-01T04:12:40Z');
const FADE = { m1Mean: 22.2, m1Spread: 2.3, alpha: 1 };

function circle(raDeg: number, decDeg: number, radiusDeg: number): Shape {
	return { kind: 'circle', centre: { raDeg, decDeg }, radiusDeg, containment: 0.9 };
}

function spec(id: string, latDeg: number, lonDeg: number): TelescopeSpec {
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
				widthDeg: 0.4,
				heightDeg: 0.4,
				rotationDeg: 0,
				offsetXDeg: 0,
				offsetYDeg: 0
			}
		],
		depth: {
			filter: 'R',
			refLimitMag: 21,
			refExposureS: 60,
			floorMag: 25,
			extinctionMag: 0.1,
			darkSkyMag: 21.5
		},
		exposureS: 120,
		overheadS: 20,
		maxTiles: 24,
		closures: []
	};
}

const SPECS = [spec('ALM', -30.2, -70.7), spec('FAR', 82, 20)];
const SHAPES = [circle(83.4, -8.2, 3), circle(83.6, -8.4, 0.5)];

function world(): {
	transient: BoardTransient;
	outlook: BoardOutlook;
	telescopes: BoardTelescope[];
} {
	const joint = jointRegion(SHAPES);
	const body = computeOutlook({
		nowMs: NOW_MS,
		spanHours: 24,
		t0Ms: Date.parse(T0),
		centre: joint.centre,
		points: joint.points,
		telescopes: SPECS,
		fade: FADE
	});
	const iso = (ms: number) => new Date(ms).toISOString();
	const outlook: BoardOutlook = {
		computedAt: iso(body.computedMs),
		regionVersion: 2,
		networkCatch: body.networkCatch,
		costOfWaitingPoints: body.costOfWaitingPoints,
		fade: { ...FADE, streamName: 'Tambour' },
		order: body.networkOrder.map(({ telescopeId }) => telescopeId),
		rows: body.rows.map((row) => ({
			telescopeCode: row.telescopeId,
			catch: row.catch,
			reach: row.reach,
			opensAt: row.opensMs === null ? null : iso(row.opensMs),
			windows: row.windows.map((window) => ({
				startAt: iso(window.startMs),
				endAt: iso(window.endMs),
				opensBy: window.opensBy,
				endsBy: window.endsBy
			})),
			whyNot: row.forbidden ? 'in words' : null,
			forbidden: row.forbidden && {
				limit: row.forbidden.limit,
				missingDeg: row.forbidden.closestDeg,
				at: row.forbidden.atMs === null ? null : iso(row.forbidden.atMs)
			},
			atOpening: row.atOpening,
			tiles: row.plan.map(({ startMs, ...tile }) => ({ ...tile, startAt: iso(startMs) })),
			strip: row.strip
		}))
	};
	const transient: BoardTransient = {
		designation: 'D26L01-a',
		revision: 1,
		state: 'open',
		isTest: false,
		isDrill: false,
		t0: T0,
		firstReceivedAt: T0,
		headline: '',
		taken: null,
		decision: null,
		parts: SHAPES.map((shape, index) => ({
			alertId: String(index),
			packetId: `P-${index}`,
			streamCode: ['tambour', 'carapace'][index]!,
			streamName: ['Tambour', 'Carapace'][index]!,
			streamClass: 'gamma',
			receivedAt: iso(Date.parse(T0) + 38_000 * (index + 1)),
			membership: index === 0 ? 'started' : 'joined',
			logOdds: index === 0 ? null : Math.log(310),
			shape
		})),
		region: {
			version: 2,
			method: joint.method,
			centre: joint.centre,
			sigmaDeg: joint.sigmaDeg,
			area50Deg2: joint.area50Deg2,
			area90Deg2: joint.area90Deg2,
			equivalentRadiusDeg: joint.equivalentRadiusDeg,
			logOddsAgreement: Math.log(310),
			before: { area90Deg2: 28.31, cause: 'Carapace P-1, serial 1' },
			searched: null
		},
		outlook,
		slots: [],
		reports: []
	};
	const telescopes = SPECS.map((item): BoardTelescope => {
		const { minAltDeg, sunDistanceDeg, horizon, ...limits } = item.limits;
		return {
			code: item.id,
			name: `Telescope ${item.id}`,
			site: 'Somewhere',
			apertureM: 1.5,
			latDeg: item.site.latDeg,
			lonDeg: item.site.lonDeg,
			minAltDeg,
			sunDistanceDeg,
			limits: { ...limits, hasHorizon: horizon !== null },
			depth: item.depth,
			overheadS: item.overheadS,
			filters: ['R'],
			exposureS: item.exposureS,
			detectors: item.detectors,
			holds: [],
			closed: null
		};
	});
	return { transient, outlook, telescopes };
}

const { transient, outlook, telescopes } = world();
const region = transient.region!;
const context = (code: string) => ({
	transient,
	outlook,
	row: outlook.rows.find(({ telescopeCode }) => telescopeCode === code)!,
	telescope: telescopes.find((telescope) => telescope.code === code)
});
const step = (explanation: Explanation | undefined, label: string) =>
	explanation?.steps.find((item) => item.label === label)?.text ?? '';

describe('the joint region', () => {
	it('shows the board’s area, radius and the area before', () => {
		const area = explainArea(transient, region);
		expect(area.value).toBe(formatArea(region.area90Deg2));
		expect(step(area, '90 % region')).toContain(formatArea(region.area90Deg2));
		expect(step(area, '90 % region')).toContain(formatArea(region.area50Deg2));
		expect(step(area, 'Before')).toBe('28.3 deg²; changed by Carapace P-1, serial 1');
	});
	it('says how many reports of nothing are in it, and the chance of too faint a source', () => {
		expect(step(explainArea(transient, region), 'Looked at, nothing seen')).toBe('');
		const searched = { ...region, searched: { reports: 2, tooFaintChance: 0.374 } };
		const text = step(explainArea(transient, searched), 'Looked at, nothing seen');
		expect(text).toContain('2 reports of nothing');
		expect(text).toContain('37 %');
	});
	it('names each live alert with its shape and its arrival', () => {
		const area = explainArea(transient, region);
		expect(step(area, 'Tambour')).toBe(
			'circle of radius 3.0° (90 %), received +38s after the trigger'
		);
		expect(step(area, 'Carapace')).toContain('circle of radius 30′ (90 %)');
		expect(area.sources.join()).toContain('Fisher 1953');
	});
	it('says that alerts that do not overlap are all kept', () => {
		const apart = explainArea(transient, { ...region, method: 'none', sigmaDeg: null });
		expect(step(apart, 'Joined')).toContain('do not overlap');
	});
	it('gives the centre in degrees too', () => {
		const { raDeg, decDeg } = region.centre;
		expect(step(explainCentre(transient, region), 'In degrees')).toBe(
			`${raDeg.toFixed(5)}°, ${decDeg.toFixed(5)}°`
		);
	});
});

describe('agreement', () => {
	it('shows the board’s odds and the odds at which each alert joined', () => {
		const odds = explainAgreement(transient, region);
		expect(odds.value).toBe(`yes, ${formatOdds(Math.log(310)).ratio}`);
		expect(step(odds, 'Carapace')).toContain('joined at odds of 310 : 1');
		expect(odds.sources.join()).toContain('Budavári & Szalay 2008');
	});
	it('has nothing to compare with one alert', () => {
		const single = explainAgreement(transient, { ...region, logOddsAgreement: null });
		expect(single.value).toBe('one alert only');
	});
});

describe('a telescope', () => {
	it('that can observe: catch, reach and the place at opening are the board’s', () => {
		const { row } = context('ALM');
		const [caught, reached, opens, pointing] = explainRow(context('ALM'), 'now');
		expect(row.catch).toBeGreaterThan(0);
		expect(caught?.value).toBe(formatChance(row.catch));
		const sum = row.tiles.reduce((all, tile) => all + tile.probability * tile.detectChance, 0);
		expect(step(caught, 'Sum')).toContain(formatChance(sum));
		expect(step(caught, 'Plan')).toContain(`${row.tiles.length} tiles of 120 s`);
		expect(step(caught, 'Fade')).toContain('R 22.2 ± 2.3 mag one hour after the trigger');
		expect(reached?.value).toBe(formatShare(row.reach));
		expect(step(opens, 'Limits')).toContain('Sun below −12°; altitude from 25°');
		expect(step(pointing, 'Altitude')).toContain(`${row.atOpening!.altDeg.toFixed(1)}°`);
		expect(step(pointing, 'Airmass')).toBe(row.atOpening!.airmass.toFixed(2));
	});
	it('shows a limit whose parts add up', () => {
		const { row } = context('ALM');
		const text = step(explainRow(context('ALM'), 'now')[3], 'Limit, 5σ');
		const numbers = [...text.matchAll(/([+−])(\d+\.\d+) for/g)].map(
			([, sign, value]) => Number(value) * (sign === '−' ? -1 : 1)
		);
		expect(numbers.length).toBeGreaterThanOrEqual(2);
		const sum = numbers.reduce((all, value) => all + value, 21);
		expect(Math.abs(sum - row.atOpening!.limitMag)).toBeLessThan(0.06);
	});
	it('that never sees it says which limit forbids it and how close it comes', () => {
		const { row } = context('FAR');
		expect(row.forbidden?.limit).toBe('altitude');
		const [caught, , opens, pointing] = explainRow(context('FAR'), 'never');
		// At 82° N a declination of −8.4° culminates 0.4° below the horizon, 25.4° short of the limit.
		expect(row.forbidden?.missingDeg).toBeCloseTo(25.4, 0);
		const why = `Forbidden by the least altitude (at least 25°). It comes within ${row.forbidden!.missingDeg!.toFixed(1)}° of being allowed`;
		expect(step(opens, 'Why not')).toContain(why);
		expect(step(caught, 'Plan')).toContain(why);
		expect(pointing).toBeUndefined();
	});
	it('that the site has closed says so without a distance', () => {
		const closed = context('FAR');
		const row = {
			...closed.row,
			forbidden: { limit: 'closure' as const, missingDeg: null, at: null }
		};
		const opens = explainRow({ ...closed, row }, 'never')[2];
		expect(step(opens, 'Why not')).toBe('Forbidden by a closure by the site.');
	});
});

describe('the network', () => {
	it('shows its catch, who adds to it in order and what waiting costs', () => {
		const caught = explainNetworkCatch(transient, outlook, telescopes);
		expect(caught.value).toBe(formatChance(outlook.networkCatch));
		expect(step(caught, '1. Telescope ALM')).toContain(formatChance(context('ALM').row.catch));
		const cost = explainCostOfWaiting(outlook);
		expect(outlook.costOfWaitingPoints).toBeGreaterThan(0);
		expect(step(cost, 'An hour later')).toContain(
			formatChance(outlook.networkCatch - outlook.costOfWaitingPoints / 100)
		);
	});
});
