import { describe, expect, it } from 'vitest';
import type { BoardTelescope, BoardTransient } from '../../domain/board';
import { bandText, bandTicks, duskRuns, longitudeText } from './duskBand';

const utcMs = Date.parse('2026-12-01T04:12:40Z');
const telescope = (code: string, name: string, lonDeg: number) =>
	({ code, name, lonDeg }) as BoardTelescope;
const transient = {
	designation: 'D26L01-b',
	outlook: {
		rows: [
			{
				telescopeCode: 'ALM',
				windows: [{ startAt: '2026-12-01T03:00:00Z', endAt: '2026-12-01T06:00:00Z' }]
			},
			{
				telescopeCode: 'WIR',
				windows: [{ startAt: '2026-12-01T10:00:00Z', endAt: '2026-12-01T12:00:00Z' }]
			}
		]
	}
} as unknown as BoardTransient;

describe('duskRuns', () => {
	it('covers all longitudes once, in order', () => {
		const runs = duskRuns(utcMs);
		expect(runs[0]?.fromDeg).toBe(0);
		expect(runs.at(-1)?.toDeg).toBe(360);
		for (const [i, run] of runs.entries()) {
			if (i > 0) expect(run.fromDeg).toBe(runs[i - 1]?.toDeg);
		}
	});
	it('is day where it is noon and night where it is midnight', () => {
		const bandAt = (lonDeg: number) =>
			duskRuns(utcMs).find(({ fromDeg, toDeg }) => fromDeg <= lonDeg + 180 && lonDeg + 180 < toDeg)
				?.band;
		expect(bandAt(117)).toBe('day');
		expect(bandAt(-63)).toBe('night');
	});
});

describe('bandTicks', () => {
	it('is solid only where a window is open now', () => {
		const ticks = bandTicks(
			[telescope('ALM', 'Cerro Almendra', -70), telescope('WIR', 'Mount Wirrabel', 149)],
			transient,
			utcMs,
			duskRuns(utcMs)
		);
		expect(ticks.map(({ canObserve }) => canObserve)).toEqual([true, false]);
		expect(ticks.map(({ bright }) => bright)).toEqual([false, true]);
		expect(ticks[0]?.atDeg).toBe(110);
	});
});

describe('bandText', () => {
	it('says where it is night and who can observe', () => {
		const runs = duskRuns(utcMs);
		const ticks = bandTicks([telescope('ALM', 'Cerro Almendra', -70)], transient, utcMs, runs);
		const text = bandText(runs, ticks, 'D26L01-b');
		expect(text).toMatch(/night from \d+° W to \d+° E/);
		expect(text).toContain('Can observe D26L01-b now: Cerro Almendra. Can not: none.');
	});
	it('follows a night across the dateline', () => {
		const text = bandText(duskRuns(Date.parse('2026-12-01T12:00:00Z')), [], null);
		expect(text).toMatch(/night from \d+° E to \d+° W/);
	});
});

describe('longitudeText', () => {
	it.each([
		[0, '180°'],
		[110, '70° W'],
		[180, '0°'],
		[329, '149° E']
	])('names %d as %s', (atDeg, text) => expect(longitudeText(atDeg)).toBe(text));
});
