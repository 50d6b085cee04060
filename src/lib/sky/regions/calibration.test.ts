import { describe, expect, it } from 'vitest';
import { mocContains } from '../moc/moc';
import { seededDraws } from '../testing/arbitraryPosition';
import { drawJointSource, simulatedShapes, type SimulatedKind } from '../testing/simulatedShape';
import { offset, separationDeg, toEquatorial } from '../vector';
import { kappaFromRadius, radiusFromKappa } from './containment';
import { canonicalOrder } from './canonicalOrder';
import { jointRegion } from './jointRegion';
import { multiplyParts, prepareParts } from './parts';
import type { CircleShape } from './shape';

const DRAWS = 4000;
/** Sources drawn into each region on the mesh, where a region costs a thousand times what a source does. */
const SOURCES_PER_REGION = 50;

/** The tightest part comes first: sources are drawn from it. */
const combinations: SimulatedKind[][] = [
	['ellipse'],
	['annulus'],
	['polygon'],
	['map'],
	['hardCircle'],
	['circle', 'ellipse'],
	['circle', 'annulus'],
	['circle', 'polygon'],
	['circle', 'map'],
	['circle', 'hardCircle'],
	['annulus', 'annulus'],
	['ellipse', 'annulus'],
	['ellipse', 'ellipse'],
	['ellipse', 'polygon'],
	['map', 'annulus'],
	['map', 'polygon'],
	['hardCircle', 'hardCircle'],
	['hardCircle', 'ellipse'],
	['circle', 'ellipse', 'annulus'],
	['circle', 'circle', 'hardCircle'],
	['polygon', 'map', 'ellipse']
];

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
			const product = multiplyParts(prepareParts(canonicalOrder(parts)));
			if (product.kind !== 'fisher') throw new Error('circles alone need no mesh');
			const centre = toEquatorial(product.mean);
			const radiusDeg = radiusFromKappa(product.kappa, 0.9);
			if (separationDeg(centre, source) <= radiusDeg) inside++;
			// Coverage and points, which the answer does not hang on, take most of the time of a whole region.
			if (i % 20 !== 0) continue;
			const region = jointRegion(parts);
			expect(separationDeg(region.centre, centre)).toBeLessThan(1e-12);
			expect(region.equivalentRadiusDeg / radiusDeg).toBeCloseTo(1, 9);
		}
		expect(Math.abs(inside / DRAWS - 0.9)).toBeLessThan(0.015);
	}, 240_000);

	it('does so on the mesh, all shapes alone and together: 84 regions from 20′ to 80°, poles and RA 0 included', () => {
		const draw = seededDraws(20_260_402);
		const special = [0, 90, -90, 45].map((decDeg) => ({ raDeg: 359.99, decDeg }));
		const inside = combinations.map((kinds) =>
			[0, 1, 2, 3].map((place) => {
				const source = place < 3 ? special[(place + kinds.length) % 4]! : anywhere(draw);
				const sizeDeg = 10 ** (1.5 * draw() - 0.5);
				const parts = kinds.map((kind) => simulatedShapes[kind](source, sizeDeg, draw));
				const region = jointRegion(parts.map(({ shape }) => shape));
				expect(region.method).toBe('mesh');
				let count = 0;
				for (let i = 0; i < SOURCES_PER_REGION; i++) {
					if (mocContains(region.moc90, drawJointSource(parts, draw))) count++;
				}
				return count;
			})
		);
		const draws = inside.flat().length * SOURCES_PER_REGION;
		const share = inside.flat().reduce((sum, count) => sum + count, 0) / draws;
		expect(draws).toBeGreaterThanOrEqual(DRAWS);
		expect(Math.abs(share - 0.9)).toBeLessThan(0.015);
		// 200 draws each, 4 standard deviations: no combination makes up for another.
		for (const counts of inside) {
			const among = counts.reduce((sum, count) => sum + count, 0) / counts.length;
			expect(Math.abs(among / SOURCES_PER_REGION - 0.9)).toBeLessThan(0.085);
		}
	}, 240_000);
});
