import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { layoutLabels, type PlacedLabel, type WantedLabel } from './layoutLabels';

const WIDTH = 30;

function overlaps(placed: PlacedLabel[], wanted: WantedLabel[]): boolean {
	const widthOf = (id: string) => wanted.find((label) => label.id === id)!.width;
	return placed.some((a, i) =>
		placed
			.slice(i + 1)
			.some(
				(b) => a.row === b.row && Math.abs(a.x - b.x) < (widthOf(a.id) + widthOf(b.id)) / 2 - 1e-6
			)
	);
}

describe('layoutLabels', () => {
	it('leaves labels with room where they are wanted', () => {
		const placed = layoutLabels(
			[
				{ id: 'KAI', x: 40, width: WIDTH },
				{ id: 'ALM', x: 140, width: WIDTH }
			],
			360,
			2
		);
		expect(placed).toEqual([
			{ id: 'KAI', x: 40, row: 0 },
			{ id: 'ALM', x: 140, row: 0 }
		]);
	});

	it('puts two at the same longitude into two rows', () => {
		const placed = layoutLabels(
			[
				{ id: 'DRK', x: 200, width: WIDTH },
				{ id: 'SKA', x: 201, width: WIDTH }
			],
			360,
			2
		);
		expect(new Set(placed.map(({ row }) => row)).size).toBe(2);
	});

	it('keeps labels at the dateline inside the band', () => {
		const placed = layoutLabels([{ id: 'WIR', x: 359, width: WIDTH }], 360, 1);
		expect(placed[0]?.x).toBe(345);
	});

	it('never overlaps, never leaves the band, and places all that fit with ease', () => {
		fc.assert(
			fc.property(
				fc.array(fc.integer({ min: 0, max: 360 }), { maxLength: 16 }),
				fc.integer({ min: 2, max: 3 }),
				(positions, rows) => {
					const wanted = positions.map((x, i) => ({ id: `T${i}`, x, width: WIDTH }));
					const placed = layoutLabels(wanted, 360, rows);
					expect(overlaps(placed, wanted)).toBe(false);
					for (const { x } of placed) {
						expect(x - WIDTH / 2).toBeGreaterThanOrEqual(-1e-6);
						expect(x + WIDTH / 2).toBeLessThanOrEqual(360 + 1e-6);
					}
					expect(placed).toHaveLength(wanted.length);
				}
			)
		);
	});
});
