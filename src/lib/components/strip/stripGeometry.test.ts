import { describe, expect, it } from 'vitest';
import type { BoardWindow } from '../../domain/board';
import type { Strip } from '../../sky/outlook/outlook';
import { altitudeAt, bandSpans, unusableCurves, usableCurves } from './stripGeometry';

const startMs = Date.parse('2026-12-01T00:00:00Z');
const at = (hours: number) => new Date(startMs + hours * 3_600_000).toISOString();

/** Rises through the horizon at 2 h, 40° at 4 h, sets at 6 h, −20° at both ends of 8 h. */
const strip: Strip = {
	startMs,
	stepMinutes: 60,
	altDeg: [-40, -20, 0, 20, 40, 20, 0, -20, -40],
	bands: [
		{ startMs, band: 'day' },
		{ startMs: startMs + 2 * 3_600_000, band: 'night' }
	]
};
const window = (from: number, to: number): BoardWindow => ({
	startAt: at(from),
	endAt: at(to),
	opensBy: 'altitude',
	endsBy: 'altitude'
});

describe('altitudeAt', () => {
	it('is linear between steps', () => {
		expect(altitudeAt(strip, startMs + 3.5 * 3_600_000)).toBeCloseTo(30, 9);
	});
	it('answers at both ends and not outside', () => {
		expect(altitudeAt(strip, startMs)).toBe(-40);
		expect(altitudeAt(strip, startMs + 8 * 3_600_000)).toBe(-40);
		expect(altitudeAt(strip, startMs - 1)).toBeNull();
	});
});

describe('bandSpans', () => {
	it('runs to the end of the strip', () => {
		expect(bandSpans(strip)).toEqual([
			{ from: 0, to: 0.25, band: 'day' },
			{ from: 0.25, to: 1, band: 'night' }
		]);
	});
});

describe('usableCurves', () => {
	it('starts and ends exactly at the window', () => {
		const [curve] = usableCurves(strip, [window(3.5, 5.25)]);
		expect(curve?.[0]).toEqual({ share: 3.5 / 8, altDeg: 30 });
		expect(curve?.at(-1)?.share).toBeCloseTo(5.25 / 8, 9);
		expect(curve).toHaveLength(4);
	});
	it('cuts a window that began before the strip', () => {
		expect(usableCurves(strip, [window(-5, 4)])[0]?.[0]?.share).toBe(0);
	});
	it('leaves out a window after the strip', () => {
		expect(usableCurves(strip, [window(9, 10)])).toEqual([]);
	});
});

describe('unusableCurves', () => {
	it('is all of the time above the horizon when there is no window', () => {
		const curves = unusableCurves(strip, []);
		expect(curves).toHaveLength(1);
		expect(curves[0]?.points[0]?.share).toBeCloseTo(2 / 8, 9);
		expect(curves[0]?.points.at(-1)?.share).toBeCloseTo(6 / 8, 9);
	});
	it('is split where the sky turns from bright to dark', () => {
		const dusk = {
			...strip,
			bands: [strip.bands[0]!, { startMs: startMs + 4 * 3_600_000, band: 'night' as const }]
		};
		const curves = unusableCurves(dusk, []);
		expect(curves.map(({ bright }) => bright)).toEqual([true, false]);
		expect(curves[0]?.points.at(-1)).toEqual({ share: 0.5, altDeg: 40 });
		expect(curves[1]?.points[0]).toEqual({ share: 0.5, altDeg: 40 });
	});
	it('leaves a gap where the window is', () => {
		const curves = unusableCurves(strip, [window(3, 5)]);
		expect(curves.map(({ points }) => [points[0]?.share, points.at(-1)?.share])).toEqual([
			[2 / 8, 3 / 8],
			[5 / 8, 6 / 8]
		]);
	});
	it('is empty when the window covers all of it', () => {
		expect(unusableCurves(strip, [window(2, 6)])).toEqual([]);
	});
});
