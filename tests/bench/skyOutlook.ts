import { readFileSync } from 'node:fs';
import { normaliseDeg, type Equatorial } from '../../src/lib/sky/angle';
import { DEFAULT_FADE } from '../../src/lib/sky/catch/fade';
import {
	altitudeGrid,
	gridInstants,
	type AltitudeUnit
} from '../../src/lib/sky/ephemeris/altitudeGrid';
import { computeOutlook } from '../../src/lib/sky/outlook/computeOutlook';
import type { OutlookInput } from '../../src/lib/sky/outlook/outlook';
import { jointRegion, type RegionPoints } from '../../src/lib/sky/regions/jointRegion';
import { offset } from '../../src/lib/sky/vector';
import type { TelescopeSpec } from '../../src/lib/sky/visibility/telescope';
import { gaussianMap } from './gaussianMap';
import type { BenchRow } from './run';

const NOW_MS = Date.UTC(2026, 11, 1, 4, 12);
const CENTRE = { raDeg: 83.4, decDeg: -8.2 };
const GOLDEN_ANGLE_DEG = 137.50776405003785;

/**
 * Altitudes per second, their agreement with astropy, and the time of a small and a wide outlook.
 * `outlook_wide_ms`: outlook of a 500 deg² map region (multi-order), 60 telescopes, from the region's points to the
 * ranked result: under 1000 ms. `outlook_wide_with_region_ms`: the same with the map's joint region made first.
 */
export default function skyOutlook(): Promise<BenchRow[]> {
	const small = outlookInput(gaussianPoints(Math.sqrt(1.2 / Math.PI), 200), CENTRE);
	const map = gaussianMap(10, 500, CENTRE);
	const wide = jointRegion([map]);
	const withRegion = () => {
		const region = jointRegion([map]);
		return computeOutlook(outlookInput(region.points, region.centre));
	};
	return Promise.resolve([
		['sin_altitudes_per_s', altitudesPerS('sine'), 'per_s'],
		['altitudes_per_s', altitudesPerS('degrees'), 'per_s'],
		['altitude_max_diff_arcsec', altitudeMaxDiffArcsec(), 'arcsec'],
		['outlook_small_ms', medianMs(() => computeOutlook(small), 60, 41), 'ms'],
		[
			'outlook_wide_ms',
			medianMs(() => computeOutlook(outlookInput(wide.points, wide.centre)), 3, 9),
			'ms'
		],
		['outlook_wide_with_region_ms', medianMs(withRegion, 3, 9), 'ms']
	]);
}

/** 192 positions × 40 sites × 288 times, results stored; nutation per instant made once, outside the timing. */
function altitudesPerS(unit: AltitudeUnit): number {
	const positions = Array.from({ length: 192 }, (_, i) => ({
		raDeg: normaliseDeg(i * GOLDEN_ANGLE_DEG),
		decDeg: (Math.asin((2 * (i + 0.5)) / 192 - 1) * 180) / Math.PI
	}));
	const sites = Array.from({ length: 40 }, (_, i) => ({
		latDeg: -80 + 4 * i,
		lonDeg: 9 * i - 180,
		heightM: 1000
	}));
	const instants = gridInstants(Array.from({ length: 288 }, (_, i) => NOW_MS + i * 300_000));
	const out = sites.map(() => new Float32Array(positions.length * instants.length));
	const ms = medianMs(
		() => sites.forEach((site, i) => altitudeGrid(positions, instants, site, unit, out[i]!)),
		5,
		25
	);
	return (positions.length * sites.length * instants.length * 1000) / ms;
}

/** The same function on every row of the reference file. */
function altitudeMaxDiffArcsec(): number {
	const lines = readFileSync(new URL('../../fixtures/reference/altaz.csv', import.meta.url), 'utf8')
		.split('\n')
		.filter((line) => line !== '' && !line.startsWith('#'))
		.slice(1);
	return lines.reduce((worst, line) => {
		const [latDeg, lonDeg, heightM, utc, raDeg, decDeg, expectedDeg] = line.split(',');
		const [altDeg = Number.NaN] = altitudeGrid(
			[{ raDeg: Number(raDeg), decDeg: Number(decDeg) }],
			gridInstants([Date.parse(utc ?? '')]),
			{ latDeg: Number(latDeg), lonDeg: Number(lonDeg), heightM: Number(heightM) },
			'degrees',
			new Float32Array(1)
		);
		return Math.max(worst, Math.abs(altDeg - Number(expectedDeg)) * 3600);
	}, 0);
}

function medianMs(run: () => unknown, warmUps: number, runs: number): number {
	for (let i = 0; i < warmUps; i += 1) run();
	const times = Array.from({ length: runs }, () => {
		const startMs = performance.now();
		run();
		return performance.now() - startMs;
	}).sort((a, b) => a - b);
	return times[runs >> 1]!;
}

function outlookInput(points: RegionPoints, centre: Equatorial): OutlookInput {
	return {
		nowMs: NOW_MS,
		spanHours: 24,
		t0Ms: NOW_MS - 30 * 60_000,
		centre,
		points,
		telescopes: telescopes(60),
		fade: DEFAULT_FADE
	};
}

/** Equal-weight points of a Gaussian whose 90 % radius is given. */
function gaussianPoints(radius90Deg: number, count: number): RegionPoints {
	const sigmaDeg = radius90Deg / 2.146;
	const places = Array.from({ length: count }, (_, i) =>
		offset(
			CENTRE,
			sigmaDeg * Math.sqrt(-2 * Math.log(1 - (0.995 * (i + 0.5)) / count)),
			normaliseDeg(i * GOLDEN_ANGLE_DEG)
		)
	);
	return {
		raDeg: places.map(({ raDeg }) => raDeg),
		decDeg: places.map(({ decDeg }) => decDeg),
		probability: places.map(() => 1 / count)
	};
}

/** Telescopes of all latitudes, mounts and fields; every sixth has a horizon mask, every seventh an hour-angle limit. */
function telescopes(count: number): TelescopeSpec[] {
	return Array.from({ length: count }, (_, i) => ({
		id: `telescope-${i}`,
		site: { latDeg: -70 + ((i * 37) % 140), lonDeg: ((i * 61) % 360) - 180, heightM: 1500 },
		limits: {
			sunAltMaxDeg: i % 3 === 0 ? -18 : -12,
			minAltDeg: 20 + (i % 4) * 5,
			maxAltDeg: i % 5 === 0 ? 88 : null,
			horizon:
				i % 6 === 0
					? [0, 90, 200, 300].map((azDeg) => ({ azDeg, altDeg: 15 + (azDeg % 70) / 5 }))
					: null,
			hourAngleMaxH: i % 7 === 0 ? 4.5 : null,
			decMinDeg: null,
			decMaxDeg: null,
			moonDistanceDeg: 30,
			sunDistanceDeg: 45
		},
		detectors: [
			i % 5 === 4
				? { shape: 'circle', radiusDeg: 0.2 + (i % 7) * 0.3, offsetXDeg: 0, offsetYDeg: 0 }
				: {
						shape: 'rectangle',
						widthDeg: 0.25 + (i % 9) * 0.25,
						heightDeg: 0.25 + (i % 9) * 0.2,
						rotationDeg: i % 4 === 0 ? 20 : 0,
						offsetXDeg: 0,
						offsetYDeg: 0
					}
		],
		depth: {
			filter: 'R',
			refLimitMag: 19 + (i % 6) * 0.8,
			refExposureS: 60,
			floorMag: 24,
			extinctionMag: 0.12,
			darkSkyMag: 21
		},
		exposureS: 60 + (i % 3) * 60,
		overheadS: 20,
		maxTiles: 12 + (i % 3) * 24,
		closures: []
	}));
}
