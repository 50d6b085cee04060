import type { Equatorial } from '../../sky/angle';
import { sharedSky, siteSky, skyTarget } from '../../sky/visibility/siteSky';
import { targetWindows, telescopeNights } from '../../sky/visibility/targetWindows';
import type { Window } from '../../sky/visibility/telescope';
import { toEquatorial } from '../../sky/vector';
import type { DemoRandom } from './demoRandom';
import { DEMO_TELESCOPES, type DemoTelescope } from './demoTelescopes';

const HOUR_MS = 3_600_000;
const MOST_TRIES = 400;

/** When each telescope can point at a position within `hours` of `fromMs`. */
export type NetworkWindows = { telescope: DemoTelescope; windows: Window[] }[];

/** The windows of any position over one span; the Sun, the Moon and the nights are worked out once. */
export function networkSky(
	fromMs: number,
	hours: number
): (position: Equatorial) => NetworkWindows {
	const endMs = fromMs + hours * HOUR_MS;
	const shared = sharedSky(fromMs, endMs);
	const prepared = DEMO_TELESCOPES.map((telescope) => {
		const { latDeg, lonDeg, heightM, limits } = telescope;
		const site = { latDeg, lonDeg, heightM };
		const pointing = { site, limits, closures: [] };
		return {
			telescope,
			nights: telescopeNights(pointing, siteSky(site, shared), fromMs, endMs, 'scaled')
		};
	});
	return (position) => {
		const target = skyTarget(position, shared);
		return prepared.map(({ telescope, nights }) => ({
			telescope,
			windows: targetWindows(nights, target)
		}));
	};
}

/**
 * Draws a position of the sky, evenly, until `wanted` telescopes have it in a window for half an hour
 * from `atMs`; the best one found when no draw does.
 */
export function visiblePosition(
	random: DemoRandom,
	windowsOf: (position: Equatorial) => NetworkWindows,
	atMs: number,
	wanted: { telescopes: number; maxAbsDecDeg?: number }
): Equatorial {
	let best: { position: Equatorial; count: number } | null = null;
	for (let tries = 0; tries < MOST_TRIES; tries++) {
		const position = anywhere(random);
		if (Math.abs(position.decDeg) > (wanted.maxAbsDecDeg ?? 90)) continue;
		const count = windowsOf(position).filter(({ windows }) =>
			windows.some(({ startMs, endMs }) => startMs <= atMs && endMs >= atMs + HOUR_MS / 2)
		).length;
		if (!best || count > best.count) best = { position, count };
		if (count >= wanted.telescopes) break;
	}
	return best!.position;
}

/** A direction drawn evenly over the sphere. */
export function anywhere(random: DemoRandom): Equatorial {
	const z = random.between(-1, 1);
	const angleRad = random.between(0, 2 * Math.PI);
	const inPlane = Math.sqrt(1 - z * z);
	return toEquatorial({ x: inPlane * Math.cos(angleRad), y: inPlane * Math.sin(angleRad), z });
}
