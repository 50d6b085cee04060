import { horizonAltDeg } from './horizonMask';
import {
	hourAngleDeg,
	moonDistanceDeg,
	sunAltitudeDeg,
	sunDistanceDeg,
	moonAltitudeDeg,
	targetAltitudeDeg,
	targetHorizontal,
	type SkyTarget
} from './siteSky';
import { moonLimitDeg, type TelescopeNights } from './targetWindows';
import type { Forbidden, LimitName } from './telescope';

const COARSE_MS = 600_000;
const FINE_MS = 15_000;

/** A limit and by how many degrees it is kept at an instant; negative is broken. */
type Margin = { limit: LimitName; marginDeg: (utcMs: number) => number };

/**
 * Why a target is never up: the limit that is never kept (in the order declination, Sun distance, closure, Sun,
 * altitude, horizon, zenith, hour angle, Moon), or, when each is kept at some time but not together, the one
 * that comes closest while all others are kept. `closestDeg` is what is missing, degrees; null for closures.
 */
export function forbiddenBy(telescope: TelescopeNights, target: SkyTarget): Forbidden {
	const margins = limitMargins(telescope, target);
	const times = timesBetween(telescope.startMs, telescope.endMs, COARSE_MS);
	const table: number[][] = [];
	for (const margin of margins) {
		const row = times.map(margin.marginDeg);
		if (row.every((value) => value <= 0)) return closest(margin, times, row, telescope, () => true);
		table.push(row);
	}
	const candidates = margins.flatMap((margin, i) => {
		const othersKept = times.map((_, t) => table.every((row, j) => j === i || row[t]! > 0));
		if (!othersKept.includes(true)) return [];
		const kept = table[i]!.map((value, t) => (othersKept[t] ? value : -Infinity));
		const others = margins.filter((_, j) => j !== i);
		return [
			closest(margin, times, kept, telescope, (utcMs) =>
				others.every((other) => other.marginDeg(utcMs) > 0)
			)
		];
	});
	const missing = (forbidden: Forbidden) => forbidden.closestDeg ?? Infinity;
	candidates.sort((a, b) => missing(a) - missing(b));
	return candidates[0] ?? leastBroken(margins, times, table);
}

/** Where no single limit is the last to be broken: the instant with the fewest broken, and the worst of them. */
function leastBroken(margins: Margin[], times: number[], table: number[][]): Forbidden {
	const broken = times.map((_, t) => table.filter((row) => row[t]! <= 0).length);
	const t = broken.indexOf(Math.min(...broken));
	const values = table.map((row) => row[t]!);
	const worst = Math.min(...values);
	const limit = margins[values.indexOf(worst)]?.limit ?? 'sun';
	return {
		limit,
		closestDeg: Number.isFinite(worst) ? Math.max(0, -worst) : null,
		atMs: times[t] ?? null
	};
}

function closest(
	margin: Margin,
	times: number[],
	values: number[],
	telescope: TelescopeNights,
	allowed: (utcMs: number) => boolean
): Forbidden {
	const best = Math.max(...values);
	if (!Number.isFinite(best)) return { limit: margin.limit, closestDeg: null, atMs: null };
	let atMs = times[values.indexOf(best)]!;
	let most = best;
	const fine = timesBetween(
		Math.max(telescope.startMs, atMs - COARSE_MS),
		Math.min(telescope.endMs, atMs + COARSE_MS),
		FINE_MS
	);
	for (const utcMs of fine) {
		const value = margin.marginDeg(utcMs);
		if (value > most && allowed(utcMs)) [most, atMs] = [value, utcMs];
	}
	return { limit: margin.limit, closestDeg: Math.max(0, -most), atMs: Math.round(atMs) };
}

function timesBetween(startMs: number, endMs: number, stepMs: number): number[] {
	const steps = Math.max(1, Math.ceil((endMs - startMs) / stepMs));
	return Array.from({ length: steps + 1 }, (_, i) => startMs + ((endMs - startMs) * i) / steps);
}

function limitMargins(telescope: TelescopeNights, target: SkyTarget): Margin[] {
	const { sky, moonRule } = telescope;
	const { limits, closures } = telescope.pointing;
	const { decDeg } = target.position;
	const { decMinDeg, decMaxDeg, maxAltDeg, hourAngleMaxH, horizon } = limits;
	const altDeg = (utcMs: number) => targetAltitudeDeg(sky, target, utcMs);
	const moonOff = (utcMs: number) => moonRule === 'scaled' && moonAltitudeDeg(sky, utcMs) <= 0;
	const all: (Margin | null)[] = [
		{
			limit: 'declination',
			marginDeg: () => {
				const least = Math.min(decDeg - (decMinDeg ?? -91), (decMaxDeg ?? 91) - decDeg);
				// The limit itself still counts as inside.
				return least === 0 ? Number.EPSILON : least;
			}
		},
		{
			limit: 'sunDistance',
			marginDeg: (utcMs) => sunDistanceDeg(sky, target, utcMs) - limits.sunDistanceDeg
		},
		{
			limit: 'closure',
			marginDeg: (utcMs) =>
				closures.some(({ startMs, endMs }) => utcMs >= startMs && utcMs < endMs)
					? -Infinity
					: Infinity
		},
		{ limit: 'sun', marginDeg: (utcMs) => limits.sunAltMaxDeg - sunAltitudeDeg(sky, utcMs) },
		{ limit: 'altitude', marginDeg: (utcMs) => altDeg(utcMs) - limits.minAltDeg },
		horizon === null || horizon.length === 0
			? null
			: {
					limit: 'horizon',
					marginDeg: (utcMs) => {
						const at = targetHorizontal(sky, target, utcMs);
						return at.altDeg - horizonAltDeg(horizon, at.azDeg);
					}
				},
		maxAltDeg === null
			? null
			: { limit: 'zenith', marginDeg: (utcMs) => maxAltDeg - altDeg(utcMs) },
		hourAngleMaxH === null
			? null
			: {
					limit: 'hourAngle',
					marginDeg: (utcMs) => hourAngleMaxH * 15 - Math.abs(hourAngleDeg(sky, target, utcMs))
				},
		{
			limit: 'moon',
			marginDeg: (utcMs) =>
				moonOff(utcMs)
					? Infinity
					: moonDistanceDeg(sky, target, utcMs) - moonLimitDeg(telescope, utcMs)
		}
	];
	return all.filter((margin) => margin !== null);
}
