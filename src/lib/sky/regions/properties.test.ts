import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Equatorial } from '../angle';
import { difference, mocAreaDeg2 } from '../moc/moc';
import { arbitraryPosition, seededDraws } from '../testing/arbitraryPosition';
import { simulatedShapes, type SimulatedKind } from '../testing/simulatedShape';
import { offset, separationDeg } from '../vector';
import { credibleRegion } from './credible';
import { densityOf } from './density/densityOf';
import { jointRegion } from './jointRegion';
import { columnsOf, probabilityColumn } from './cellColumns';
import { buildMesh } from './mesh';
import type { Shape } from './shape';

const sizes = fc.double({ min: -2, max: 1, noNaN: true }).map((power) => 10 ** power);
const angles = fc.double({ min: 0, max: 180, noNaN: true });

/** An ellipse, a circle and a hard circle, at distances and angles counted from the ellipse's own north. */
function groupAt(centre: Equatorial, sizeDeg: number, angleDeg: number): Shape[] {
	return [
		{
			kind: 'ellipse',
			centre,
			semiMajorDeg: sizeDeg,
			semiMinorDeg: sizeDeg / 2,
			positionAngleDeg: angleDeg,
			containment: 0.9
		},
		{
			kind: 'circle',
			centre: offset(centre, sizeDeg / 2, angleDeg + 40),
			radiusDeg: sizeDeg,
			containment: 0.9
		},
		{ kind: 'hardCircle', centre: offset(centre, sizeDeg / 3, angleDeg + 200), radiusDeg: sizeDeg }
	];
}

describe('regions on the mesh', { timeout: 120_000 }, () => {
	it('turn with the sky, to the poles and across RA 0', () => {
		fc.assert(
			fc.property(
				arbitraryPosition,
				arbitraryPosition,
				sizes,
				angles,
				(here, there, size, angle) => {
					const one = jointRegion(groupAt(here, size, angle));
					const other = jointRegion(groupAt(there, size, angle));
					expect([one.method, other.method]).toEqual(['mesh', 'mesh']);
					expect(Math.abs(one.area90Deg2 / other.area90Deg2 - 1)).toBeLessThan(0.01);
					expect(Math.abs(one.area50Deg2 / other.area50Deg2 - 1)).toBeLessThan(0.015);
					expect(
						Math.abs(separationDeg(here, one.centre) - separationDeg(there, other.centre))
					).toBeLessThan(0.01 * size);
				}
			),
			{ numRuns: 15 }
		);
	});

	it('are the same for right ascensions a turn further', () => {
		const turned = (shape: Shape): Shape =>
			'centre' in shape
				? { ...shape, centre: { ...shape.centre, raDeg: shape.centre.raDeg - 360 } }
				: shape;
		fc.assert(
			fc.property(arbitraryPosition, sizes, angles, (centre, size, angle) => {
				const parts = groupAt(centre, size, angle);
				const one = jointRegion(parts);
				const other = jointRegion(parts.map(turned));
				expect(Math.abs(one.area90Deg2 / other.area90Deg2 - 1)).toBeLessThan(1e-3);
				expect(separationDeg(one.centre, other.centre)).toBeLessThan(1e-3 * size);
				expect(other.centre.raDeg).toBeGreaterThanOrEqual(0);
			}),
			{ numRuns: 8 }
		);
	});

	it('grow with the share they hold, each inside the next, whatever the shapes', () => {
		const kinds = Object.keys(simulatedShapes) as SimulatedKind[];
		const draw = seededDraws(90);
		fc.assert(
			fc.property(
				fc.constantFrom(...kinds),
				fc.constantFrom(...kinds),
				sizes,
				(first, second, size) => {
					const source = { raDeg: 360 * draw(), decDeg: 180 * draw() - 90 };
					const parts = [first, second].map((kind) =>
						simulatedShapes[kind](source, size + 0.3, draw)
					);
					const mesh = buildMesh(parts.map(({ shape }) => densityOf(shape)));
					const middle = mesh.cells.reduce((most, cell) =>
						cell.density > most.density ? cell : most
					).at;
					const cells = columnsOf(mesh.cells);
					const probability = probabilityColumn(cells);
					let smaller = credibleRegion(cells, probability, 0.1, middle);
					for (const share of [0.3, 0.5, 0.6827, 0.9, 0.95]) {
						const larger = credibleRegion(cells, probability, share, middle);
						expect(larger.areaDeg2).toBeGreaterThan(smaller.areaDeg2);
						// Coverage of more than 2000 ranges is grown to coarser cells, the smaller set maybe further.
						const covered = [smaller, larger].map(
							({ moc, areaDeg2 }) => mocAreaDeg2(moc) / areaDeg2
						);
						if (Math.max(...covered) < 1.05)
							expect(difference(smaller.moc, larger.moc)).toEqual([]);
						smaller = larger;
					}
				}
			),
			{ numRuns: 15 }
		);
	});
});
