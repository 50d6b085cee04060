import { apparentVector } from '../ephemeris/instant';
import { DEG_PER_RAD, requireInRange } from '../angle';
import { dot, type Vector } from '../vector';
import { networkCatch, pointChances, type PointChances } from '../catch/networkCatch';
import { limitMagAt, planCatch, tilePlan, type PlanStep, type TileOnSky } from '../catch/tilePlan';
import { regionSample, type RegionSample } from '../tiling/regionSample';
import { tilesFor, type RegionTile } from '../tiling/tilesFor';
import { airmass } from '../visibility/airmass';
import { forbiddenBy } from '../visibility/forbiddenBy';
import {
	moonAltitudeDeg,
	moonDistanceDeg,
	moonPhase,
	sharedSky,
	siteSky,
	skyTarget,
	sunDistanceDeg,
	targetHorizontal,
	type SharedSky,
	type SiteSky,
	type SkyTarget
} from '../visibility/siteSky';
import { targetWindows, telescopeNights, type TelescopeNights } from '../visibility/targetWindows';
import type { TelescopeSpec, Window } from '../visibility/telescope';
import { tidyWindows, uniteWindows } from '../visibility/windows';
import type { Outlook, OutlookInput, OutlookRow, Strip } from './outlook';
import { reach, type DatedPoints } from './reach';
import { nightStrip, stripBands, stripEndMs, stripStartMs } from './strip';

const HOUR_MS = 3_600_000;

/** What all telescopes of one outlook share. */
type Shared = {
	input: OutlookInput;
	region: RegionSample;
	sky: SharedSky;
	centre: SkyTarget;
	points: DatedPoints;
	startMs: number;
	endMs: number;
	skyOf: (spec: TelescopeSpec) => { sky: SiteSky; bands: Strip['bands'] };
	tilesOf: (spec: TelescopeSpec) => { tile: RegionTile; target: SkyTarget }[];
};

/** One telescope's row with what the network needs of it. */
type Computed = { row: OutlookRow; now: PointChances; later: PointChances };

/**
 * The outlook of one region for every telescope: windows in which at least one tile of its plan is inside all
 * limits, tile plan, catch and reach, ranked by catch and then by opening; and the catch of the network now and
 * an hour later. Windows start with the night strip (an hour and a half before now); plans start at `nowMs`.
 * Needs nothing but its input, and input and result can be cloned into a worker thread.
 */
export function computeOutlook(input: OutlookInput): Outlook {
	const shared = prepare(input);
	const computed = input.telescopes.map((spec) => computeRow(spec, shared));
	const now = networkCatch(
		computed.map((telescope) => telescope.now),
		shared.region
	);
	const later = networkCatch(
		computed.map((telescope) => telescope.later),
		shared.region
	);
	return {
		computedMs: input.nowMs,
		rows: computed.map(({ row }) => row).sort(byRank),
		networkCatch: now.catch,
		networkCatchLater: later.catch,
		costOfWaitingPoints: Math.max(0, 100 * (now.catch - later.catch)),
		networkOrder: now.order
	};
}

/** Greatest catch first, then earliest opening, then most reach, then identity. */
function byRank(a: OutlookRow, b: OutlookRow): number {
	const opens = (row: OutlookRow) => row.opensMs ?? Infinity;
	if (a.catch !== b.catch) return b.catch - a.catch;
	if (opens(a) !== opens(b)) return opens(a) - opens(b);
	if (a.reach !== b.reach) return b.reach - a.reach;
	return a.telescopeId < b.telescopeId ? -1 : 1;
}

function prepare(input: OutlookInput): Shared {
	requireInRange('spanHours', input.spanHours, 1, 72);
	const startMs = stripStartMs(input.nowMs);
	const endMs = input.nowMs + input.spanHours * HOUR_MS;
	const sky = sharedSky(startMs, Math.max(endMs, stripEndMs(startMs)));
	const region = regionSample(input.points);
	const { raDeg, decDeg, probability } = input.points;
	const centre = skyTarget(input.centre, sky);
	const directions = raDeg.map((ra, i) =>
		apparentVector({ raDeg: ra, decDeg: decDeg[i]! }, sky.span.middle)
	);
	const skies = new Map<string, { sky: SiteSky; bands: Strip['bands'] }>();
	const tilings = new Map<string, { tile: RegionTile; target: SkyTarget }[]>();
	return {
		input,
		region,
		sky,
		centre,
		points: {
			directions,
			centre,
			radiusDeg: farthestDeg(directions, centre.direction),
			decDeg,
			probability
		},
		startMs,
		endMs,
		skyOf: ({ site }) =>
			remembered(skies, `${site.latDeg},${site.lonDeg},${site.heightM}`, () => {
				const above = siteSky(site, sky);
				return { sky: above, bands: stripBands(above, stripEndMs(startMs)) };
			}),
		tilesOf: ({ detectors, maxTiles }) =>
			remembered(tilings, JSON.stringify([detectors, maxTiles]), () =>
				tilesFor(region, detectors, maxTiles)
					// What only closes a gap between points is never planned, so its windows matter to nobody.
					.filter(({ probability }) => probability > 0)
					.map((tile) => ({ tile, target: skyTarget(tile.centre, sky) }))
			)
	};
}

function computeRow(spec: TelescopeSpec, shared: Shared): Computed {
	const { input, region, startMs, endMs } = shared;
	const { nowMs, t0Ms, fade } = input;
	const { sky, bands } = shared.skyOf(spec);
	const telescope = telescopeNights(spec, sky, startMs, endMs);
	const tiles: TileOnSky[] = shared
		.tilesOf(spec)
		.map(({ tile, target }) => ({ tile, target, windows: targetWindows(telescope, target) }));
	const windows = tidyWindows(uniteWindows(tiles.map((tile) => tile.windows))).map(roundWindow);
	const ahead = windows.find((window) => window.endMs > nowMs);
	const plan = tilePlan({ telescope, spec, tiles, fromMs: nowMs, t0Ms, fade });
	const planLater = tilePlan({ telescope, spec, tiles, fromMs: nowMs + HOUR_MS, t0Ms, fade });
	return {
		row: {
			telescopeId: spec.id,
			catch: planCatch(plan),
			reach: reach(telescope, shared.points, nowMs, ahead),
			opensMs: ahead?.startMs ?? null,
			windows,
			forbidden: ahead
				? null
				: forbiddenBy({ ...telescope, startMs: Math.max(startMs, nowMs) }, shared.centre),
			atOpening: ahead
				? atOpening(telescope, spec, shared.centre, Math.max(nowMs, ahead.startMs))
				: null,
			plan: plan.map(withoutTile),
			strip: nightStrip(sky, shared.centre, bands, startMs)
		},
		now: pointChances(spec.id, plan, region),
		later: pointChances(spec.id, planLater, region)
	};
}

function atOpening(
	telescope: TelescopeNights,
	spec: TelescopeSpec,
	centre: SkyTarget,
	utcMs: number
): OutlookRow['atOpening'] {
	const { sky } = telescope;
	const { altDeg, azDeg } = targetHorizontal(sky, centre, utcMs);
	return {
		altDeg,
		azDeg,
		airmass: airmass(Math.max(0, altDeg)) ?? Number.NaN,
		moonDistanceDeg: moonDistanceDeg(sky, centre, utcMs),
		moonAltDeg: moonAltitudeDeg(sky, utcMs),
		moonIlluminated: moonPhase(sky.shared, utcMs).fraction,
		sunDistanceDeg: sunDistanceDeg(sky, centre, utcMs),
		limitMag: limitMagAt({ telescope, spec }, utcMs)(centre)
	};
}

function withoutTile({ tile: _, ...planned }: PlanStep): Omit<PlanStep, 'tile'> {
	return planned;
}

function roundWindow(window: Window): Window {
	return { ...window, startMs: Math.round(window.startMs), endMs: Math.round(window.endMs) };
}

function farthestDeg(directions: readonly Vector[], from: Vector): number {
	let least = 1;
	for (const direction of directions) least = Math.min(least, dot(direction, from));
	return Math.acos(Math.max(-1, least)) * DEG_PER_RAD;
}

function remembered<Value>(known: Map<string, Value>, key: string, make: () => Value): Value {
	const found = known.get(key);
	if (found !== undefined) return found;
	const made = make();
	known.set(key, made);
	return made;
}
