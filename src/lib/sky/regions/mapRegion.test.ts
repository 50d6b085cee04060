import { describe, expect, it } from 'vitest';
import { cellAreaDeg2, cellVector, toUniq } from '../healpix/healpix';
import { expectSound } from '../testing/expectSound';
import { dot, separationDeg, toVector } from '../vector';
import { kappaFromRadius } from './containment';
import { densityOf } from './density/densityOf';
import { sortedMap } from './density/sortedMap';
import { jointRegion } from './jointRegion';
import { mapRegion } from './mapRegion';
import { buildMesh } from './mesh';
import { meshRegion } from './meshRegion';
import type { CircleShape, MapShape } from './shape';

const circle: CircleShape = {
	kind: 'circle',
	centre: { raDeg: 359, decDeg: 61 },
	radiusDeg: 8,
	containment: 0.9
};

/** The circle's Fisher density at the centres of all cells of one order. */
function mapAt(order: number): MapShape {
	const axis = toVector(circle.centre);
	const kappa = kappaFromRadius(circle.radiusDeg, circle.containment);
	const map: MapShape = { kind: 'map', uniq: [], density: [] };
	for (let pixel = 0; pixel < 12 * 4 ** order; pixel++) {
		map.uniq.push(toUniq(order, pixel));
		map.density.push(Math.exp(kappa * (dot(cellVector(order, pixel), axis) - 1)));
	}
	return map;
}

describe('the region of one map', () => {
	it('has the closed form’s areas and centre when it holds a Fisher density', () => {
		const map = mapAt(7);
		const region = jointRegion([map]);
		const closed = jointRegion([circle]);
		expectSound(region);
		expect(mapRegion(sortedMap(map))).toEqual(region);
		expect(Math.abs(region.area50Deg2 / closed.area50Deg2 - 1)).toBeLessThan(0.003);
		expect(Math.abs(region.area90Deg2 / closed.area90Deg2 - 1)).toBeLessThan(0.003);
		expect(separationDeg(region.centre, circle.centre)).toBeLessThan(0.01);
		expect(region.points.raDeg.length).toBeGreaterThan(300);
	});

	it('is what the mesh makes of the same map', () => {
		const map = mapAt(7);
		const direct = jointRegion([map]);
		const mesh = meshRegion(buildMesh([densityOf(map)]).cells);
		expect(direct.area90Deg2 / mesh.area90Deg2).toBeCloseTo(1, 6);
		expect(direct.moc90).toEqual(mesh.moc90);
		expect(direct.moc50).toEqual(mesh.moc50);
	});

	it('shares the last cell where the cells are coarse', () => {
		const region = jointRegion([{ kind: 'map', uniq: [64], density: [3] }]);
		expectSound(region);
		expect(region.area90Deg2).toBeCloseTo(0.9 * cellAreaDeg2(2), 9);
		expect(region.area50Deg2).toBeCloseTo(0.5 * cellAreaDeg2(2), 9);
	});
});
