import { expect, it } from 'vitest';
import { positionAngleDeg, separationDeg } from '../../sky/vector';
import type { Detector } from '../../sky/visibility/telescope';
import { fieldDiameterDeg, fieldRegion } from './fieldRegion';

const square: Detector = {
	shape: 'rectangle',
	widthDeg: 1,
	heightDeg: 1,
	rotationDeg: 0,
	offsetXDeg: 0,
	offsetYDeg: 0
};
const pointing = { centre: { raDeg: 359.9, decDeg: 30 }, rotationDeg: 0 };

function verticesOf(region: string) {
	const numbers = region.replace('Polygon ICRS ', '').split(' ').map(Number);
	return Array.from({ length: numbers.length / 2 }, (_, i) => ({
		raDeg: numbers[2 * i]!,
		decDeg: numbers[2 * i + 1]!
	}));
}

/** Of a square of 1 degree on the tangent plane: atan(√2 tan 0.5°). */
const CORNER_DEG = 0.707089;

it('a rectangle is a polygon with its corners in order north through east', () => {
	const vertices = verticesOf(fieldRegion(pointing, [square]));
	expect(vertices).toHaveLength(4);
	const angles = vertices.map((vertex) => positionAngleDeg(pointing.centre, vertex));
	const first = angles[0]!;
	const turned = angles.map((angle) => (angle - first + 360) % 360);
	expect(turned).toEqual([...turned].sort((a, b) => a - b));
	for (const vertex of vertices) {
		expect(separationDeg(pointing.centre, vertex)).toBeCloseTo(CORNER_DEG, 5);
	}
	expect(fieldDiameterDeg(pointing, [square])).toBeCloseTo(2 * CORNER_DEG, 5);
});

it('one round detector is a circle', () => {
	const round: Detector = { shape: 'circle', radiusDeg: 0.25, offsetXDeg: 0, offsetYDeg: 0 };
	expect(fieldRegion(pointing, [round])).toBe('Circle ICRS 359.9 30 0.25');
});

it('several detectors are a union', () => {
	const region = fieldRegion(pointing, [square, { ...square, offsetXDeg: 2 }]);
	expect(region).toMatch(/^Union ICRS \(Polygon( -?[\d.]+){8} Polygon( -?[\d.]+){8}\)$/);
});
