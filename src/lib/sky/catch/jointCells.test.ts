import { describe, expect, it } from 'vitest';
import { DEG_PER_RAD } from '../angle';
import { cellAreaSr } from '../healpix/healpix';
import type { CellColumns } from '../regions/cellColumns';
import { jointRegion } from '../regions/jointRegion';
import type { Shape } from '../regions/shape';
import { offset, toVector } from '../vector';
import { DEFAULT_FADE } from './fade';
import { jointCells } from './jointCells';
import type { NotFound } from './looks';
import { searchedRegion } from './searchedRegion';

const AT = { raDeg: 83.4, decDeg: -8.2 };
const circle = (centre: typeof AT, radiusDeg: number): Shape => ({
	kind: 'circle',
	centre,
	radiusDeg,
	containment: 0.9
});

/** Area of the densest cells that hold `share`, the last one in part, by sorting all of them. */
function areaDeg2(cells: CellColumns, share: number): number {
	const rows = [...cells.density].map((density, i) => ({
		density,
		areaSr: cellAreaSr(cells.order[i]!)
	}));
	rows.sort((a, b) => b.density - a.density);
	let held = 0;
	let areaSr = 0;
	for (const row of rows) {
		const more = row.density * row.areaSr;
		if (held + more >= share) {
			return (areaSr + ((share - held) / more) * row.areaSr) * DEG_PER_RAD ** 2;
		}
		held += more;
		areaSr += row.areaSr;
	}
	return Infinity;
}

const sumOf = (cells: CellColumns) =>
	cells.density.reduce((sum, density, i) => sum + density * cellAreaSr(cells.order[i]!), 0);

function isDisjoint({ start, order, finest }: CellColumns): boolean {
	return start.every((at, i) => i === 0 || start[i - 1]! + 4 ** (finest - order[i - 1]!) <= at);
}

const map: Shape = { kind: 'map', uniq: [1024, 1025, 4104], density: [3, 2, 1] };
const polygon: Shape = {
	kind: 'polygon',
	vertices: [AT, offset(AT, 3, 60), offset(AT, 3, 120)]
};

describe('the cells of a joint region', () => {
	it.each<[string, Shape[]]>([
		['a circle', [circle(AT, 3)]],
		['a circle of an arcsecond', [circle(AT, 1 / 3600)]],
		['two circles', [circle(AT, 3), circle(offset(AT, 1, 40), 2)]],
		['a map', [map]],
		['a circle in a polygon', [polygon, circle(offset(AT, 2, 90), 2)]]
	])('of %s hold everything once, and have its areas', (_name, shapes) => {
		const { cells, isApart } = jointCells(shapes);
		expect(isApart).toBe(false);
		const region = jointRegion(shapes);
		expect(sumOf(cells)).toBeCloseTo(1, 9);
		expect(isDisjoint(cells)).toBe(true);
		expect(Math.abs(areaDeg2(cells, 0.9) / region.area90Deg2 - 1)).toBeLessThan(0.01);
		expect(Math.abs(areaDeg2(cells, 0.5) / region.area50Deg2 - 1)).toBeLessThan(0.02);
	});

	const report = (centre: typeof AT, sideDeg: number, limitMag = 24): NotFound => ({
		tiles: [{ centre, rotationDeg: 0 }],
		detectors: [
			{
				shape: 'rectangle',
				widthDeg: sideDeg,
				heightDeg: sideDeg,
				rotationDeg: 0,
				offsetXDeg: 0,
				offsetYDeg: 0
			}
		],
		limitMag,
		atMs: 3_600_000
	});

	it.each<[string, Shape[]]>([
		['a circle', [circle(AT, 3)]],
		['a map', [map]]
	])('of %s follow reports of nothing as the region does', (_name, shapes) => {
		const reports = [report(AT, 3), report({ raDeg: 45, decDeg: 4 }, 2)];
		const { cells } = jointCells(shapes, { reports, t0Ms: 0, fade: DEFAULT_FADE });
		const { region } = searchedRegion(shapes, reports, 0, DEFAULT_FADE);
		expect(sumOf(cells)).toBeCloseTo(1, 9);
		expect(isDisjoint(cells)).toBe(true);
		expect(Math.abs(areaDeg2(cells, 0.9) / region.area90Deg2 - 1)).toBeLessThan(0.01);
	});

	it('mix what contradicts itself by the number of its parts, and by what a search left of it', () => {
		const shapes = [circle(AT, 1), circle(offset(AT, 5, 10), 1.2), circle(AT, 1.5)];
		const near = ({ density, order, x, y, z }: CellColumns) => {
			const axis = toVector(AT);
			return density.reduce((sum, value, i) => {
				const isNear =
					axis.x * x[i]! + axis.y * y[i]! + axis.z * z[i]! > Math.cos(2.5 / DEG_PER_RAD);
				return sum + (isNear ? value * cellAreaSr(order[i]!) : 0);
			}, 0);
		};
		const { cells, isApart } = jointCells(shapes);
		expect(isApart).toBe(true);
		expect(sumOf(cells)).toBeCloseTo(1, 9);
		expect(isDisjoint(cells)).toBe(true);
		expect(near(cells)).toBeCloseTo(2 / 3, 2);
		// The pair’s place was looked at, the other’s was not.
		const reports = [report(AT, 4, 22.2)];
		const searched = jointCells(shapes, { reports, t0Ms: 0, fade: DEFAULT_FADE }).cells;
		const left = searchedRegion([shapes[0]!], reports, 0, DEFAULT_FADE).nothingChance;
		expect(near(searched)).toBeCloseTo((2 * left) / (2 * left + 1), 2);
		expect(isDisjoint(searched)).toBe(true);
	});
});
