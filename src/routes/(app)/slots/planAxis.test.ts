import { describe, expect, it } from 'vitest';
import { axisBands, axisShare, planAxis } from './planAxis';

const nowMs = Date.parse('2026-12-01T04:12:40Z');
const axis = planAxis(nowMs);

describe('planAxis', () => {
	it('runs from six hours back to a day ahead', () => {
		expect(new Date(axis.startMs).toISOString()).toBe('2026-11-30T22:00:00.000Z');
		expect(new Date(axis.endMs).toISOString()).toBe('2026-12-02T04:00:00.000Z');
		expect(axisShare(axis, axis.startMs)).toBe(0);
	});
});

describe('axisBands', () => {
	it('covers the axis without gaps', () => {
		const bands = axisBands(axis, { latDeg: -30, lonDeg: -70 });
		expect(bands[0]?.from).toBe(0);
		expect(bands.at(-1)?.to).toBeCloseTo(1, 9);
		for (const [i, band] of bands.entries()) {
			if (i > 0) expect(band.from).toBe(bands[i - 1]?.to);
		}
	});
	it('is night at 70° W at four in the morning UTC and day at four in the afternoon', () => {
		const bands = axisBands(axis, { latDeg: -30, lonDeg: -70 });
		const at = (iso: string) => {
			const share = axisShare(axis, Date.parse(iso));
			return bands.find(({ from, to }) => from <= share && share < to)?.band;
		};
		expect(at('2026-12-01T04:00:00Z')).toBe('night');
		expect(at('2026-12-01T16:00:00Z')).toBe('day');
	});
	it('is day all along near the south pole in December', () => {
		expect(axisBands(axis, { latDeg: -75, lonDeg: 120 }).map(({ band }) => band)).toEqual(['day']);
	});
});
