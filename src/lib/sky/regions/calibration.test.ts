import { describe, expect, it } from 'vitest';
import { mocContains } from '../moc/moc';
import { seededDraws } from '../testing/arbitraryPosition';
import { offset, separationDeg, toEquatorial, toVector } from '../vector';
import { kappaFromRadius, radiusFromKappa } from './containment';
import { jointRegion } from './jointRegion';
import type { CircleShape, Shape } from './shape';

const DRAWS = 4000;

/** A circle as a stream would report it: off the true source as its own density says. */
function observed(
	source: { raDeg: number; decDeg: number },
	radiusDeg: number,
	draw: () => number
): CircleShape {
	const containment = 0.6827;
	const kappa = kappaFromRadius(radiusDeg, containment);
	const centre = offset(source, radiusFromKappa(kappa, draw()), 360 * draw());
	return { kind: 'circle', centre, radiusDeg, containment };
}

function anywhere(draw: () => number) {
	const z = 2 * draw() - 1;
	const phi = 2 * Math.PI * draw();
	const rho = Math.sqrt(1 - z * z);
	return toEquatorial({ x: rho * Math.cos(phi), y: rho * Math.sin(phi), z });
}

describe('calibration', () => {
	it('finds the source in the 90 % region of three circles, degrees to arcseconds, 90 ± 1.5 % of the time', () => {
		const draw = seededDraws(20_260_101);
		let inside = 0;
		for (let i = 0; i < DRAWS; i++) {
			const source = anywhere(draw);
			const scaleDeg = 10 ** (4 * draw() - 3);
			const parts = [1, 0.5, 0.8].map((factor) => observed(source, factor * scaleDeg, draw));
			const region = jointRegion(parts);
			if (separationDeg(region.centre, source) <= region.equivalentRadiusDeg) inside++;
		}
		expect(Math.abs(inside / DRAWS - 0.9)).toBeLessThan(0.015);
	}, 120_000);

	it('does so on the mesh too: an ellipse and a circle, by their coverage map', () => {
		// The ellipse is a circle stretched about the source; each mesh is two orders slower, so fewer draws and wider limits (3σ).
		const draw = seededDraws(7);
		const draws = 400;
		let inside = 0;
		for (let i = 0; i < draws; i++) {
			const source = anywhere(draw);
			const [major, minor] = [2, 0.7];
			const radius = Math.sqrt(-2 * Math.log1p(-draw()));
			const angle = 2 * Math.PI * draw();
			// 90 % semi-axes are 2.146 σ.
			const along = ((radius * Math.cos(angle)) / 2.146) * major;
			const across = ((radius * Math.sin(angle)) / 2.146) * minor;
			const turned = offset(
				source,
				Math.hypot(along, across),
				30 + (Math.atan2(across, along) * 180) / Math.PI
			);
			const parts: Shape[] = [
				{
					kind: 'ellipse',
					centre: turned,
					semiMajorDeg: major,
					semiMinorDeg: minor,
					positionAngleDeg: 30,
					containment: 0.9
				},
				observed(source, 1, draw)
			];
			// Position angles differ from source to centre by the convergence of meridians: keep off the poles.
			if (Math.abs(toVector(source).z) > 0.95) {
				i--;
				continue;
			}
			if (mocContains(jointRegion(parts).moc90, source)) inside++;
		}
		expect(Math.abs(inside / draws - 0.9)).toBeLessThan(0.045);
	}, 120_000);
});
