import { describe, expect, it } from 'vitest';
import type { Strip } from '../../sky/outlook/outlook';
import { axisMarks } from './axisMarks';

/** A day from `start` on, in steps of ten minutes. */
const day = (start: string): Strip => ({
	startMs: Date.parse(start),
	stepMinutes: 10,
	altDeg: Array.from({ length: 145 }, () => 0),
	bands: []
});
const hours = (start: string, widthPx: number) =>
	axisMarks(day(start), widthPx).map(({ atMs }) => new Date(atMs).getUTCHours());

describe('hours above a night strip', () => {
	it('are all there where there is room', () => {
		expect(hours('2026-12-01T03:00:00Z', 700)).toEqual([6, 12, 18, 0]);
	});

	it('leave out one that would touch the label of either end', () => {
		// 06 lies 20 minutes after the start, at 10 of 700 px: under the label 05:40.
		expect(hours('2026-12-01T05:40:00Z', 700)).toEqual([12, 18, 0]);
		// 06 of the next day lies 2 h before the end, at 641 px: in the label's last 61.
		expect(hours('2026-12-01T08:00:00Z', 700)).toEqual([12, 18, 0]);
	});

	it('leave each other room, and are none on an axis that has no width yet', () => {
		expect(hours('2026-12-01T03:00:00Z', 150)).toEqual([12]);
		expect(hours('2026-12-01T03:00:00Z', 0)).toEqual([]);
	});

	it('never overlap at any start or width', () => {
		for (let minutes = 0; minutes < 1440; minutes += 7) {
			for (const widthPx of [120, 200, 330, 900]) {
				const strip = day(new Date(Date.UTC(2026, 11, 1, 0, minutes)).toISOString());
				const edges = axisMarks(strip, widthPx).map(({ share }) => share * widthPx);
				// Two figures are 13.2 px wide, the start's label 33, the end's 59.4 (6.6 px a figure).
				const all = [33 - 6.6, ...edges, widthPx - 59.4 + 6.6];
				for (const [i, x] of all.entries()) {
					if (i > 0 && edges.length > 0) expect(x - all[i - 1]!).toBeGreaterThan(13.2);
				}
			}
		}
	});
});
