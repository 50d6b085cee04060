import type { Equatorial } from '../../sky/angle';
import type { FadeModel, PlannedTile } from '../../sky/outlook/outlook';
import type { JointRegion } from '../../sky/regions/jointRegion';
import { deproject, project } from '../../sky/vector';
import type { Detector } from '../../sky/visibility/telescope';
import type { DemoTelescope } from './demoTelescopes';

/** Side of the square that stands for a telescope's field in the history, degrees. */
function fieldDeg(detectors: Detector[]): number {
	const sides = detectors.map((detector) =>
		detector.shape === 'circle'
			? { sideDeg: detector.radiusDeg * Math.sqrt(2), offDeg: 0 }
			: {
					sideDeg: Math.min(detector.widthDeg, detector.heightDeg),
					offDeg: Math.max(Math.abs(detector.offsetXDeg), Math.abs(detector.offsetYDeg))
				}
	);
	return Math.max(...sides.map(({ sideDeg, offDeg }) => sideDeg + 2 * offDeg));
}

/** Depth at 5 sigma of one exposure at 30° from the zenith; airmass and Moon of the night are left out. */
export function limitMagOf(telescope: DemoTelescope, filter: string, exposureS: number): number {
	const depth = telescope.depths.find((one) => one.filter === filter) ?? telescope.depths[0]!;
	const mag = depth.refLimitMag + 1.25 * Math.log10(exposureS / depth.refExposureS);
	return Math.min(mag - 0.15 * depth.extinctionMag, depth.floorMag);
}

/** Magnitude of a source that fades as 1/t, from its magnitude at one hour. */
export function fadedMag(magAtOneHour: number, sinceT0Ms: number): number {
	return magAtOneHour + 2.5 * Math.log10(Math.max(sinceT0Ms, 1000) / 3_600_000);
}

/** The likeliest tiles of a square grid on the region, as many as fit into the time. */
export function demoTiles(
	telescope: DemoTelescope,
	region: Pick<JointRegion, 'centre' | 'points'>,
	times: { t0Ms: number; startMs: number; endMs: number },
	fade: FadeModel
): PlannedTile[] {
	const sideDeg = fieldDeg(telescope.detectors);
	const { centre, points } = region;
	const weightByCell = new Map<string, { x: number; y: number; probability: number }>();
	points.raDeg.forEach((raDeg, index) => {
		const at = project(centre, { raDeg, decDeg: points.decDeg[index]! });
		if (!at) return;
		const x = Math.round(at.eastDeg / sideDeg);
		const y = Math.round(at.northDeg / sideDeg);
		const cell = weightByCell.get(`${x},${y}`) ?? { x, y, probability: 0 };
		cell.probability += points.probability[index]!;
		weightByCell.set(`${x},${y}`, cell);
	});
	const { exposureS, overheadS } = telescope;
	const stepMs = (exposureS + overheadS) * 1000;
	const fitting = Math.max(1, Math.floor((times.endMs - times.startMs) / stepMs));
	const limitMag = limitMagOf(telescope, telescope.depths[0]!.filter, exposureS);
	return [...weightByCell.values()]
		.sort((a, b) => b.probability - a.probability)
		.slice(0, Math.min(fitting, telescope.maxTiles))
		.map(({ x, y, probability }, index) => {
			const startMs = times.startMs + index * stepMs;
			return {
				centre: deproject(centre, { eastDeg: x * sideDeg, northDeg: y * sideDeg }),
				rotationDeg: 0,
				startMs,
				exposureS,
				probability,
				detectChance: detectChance(fade, limitMag, startMs - times.t0Ms)
			};
		});
}

/** Whether one of the tiles holds the source. */
export function tilesHold(
	telescope: DemoTelescope,
	tiles: PlannedTile[],
	source: Equatorial
): boolean {
	const halfDeg = fieldDeg(telescope.detectors) / 2;
	return tiles.some((tile) => {
		const at = project(tile.centre, source);
		return at && Math.abs(at.eastDeg) <= halfDeg && Math.abs(at.northDeg) <= halfDeg;
	});
}

/** Φ of the margin over the fade model, by the logistic stand-in for Φ (error below 0.01; from memory). */
function detectChance(fade: FadeModel, limitMag: number, sinceT0Ms: number): number {
	const margin = (limitMag - fadedMag(fade.m1Mean, sinceT0Ms)) / fade.m1Spread;
	return 1 / (1 + Math.exp(-1.702 * margin));
}
