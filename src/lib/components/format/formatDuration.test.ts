import { describe, expect, it } from 'vitest';
import { formatAfter, formatClock, formatOpens, formatSpan } from './formatDuration';

const MINUTE_MS = 60_000;
const HOUR_MS = 3_600_000;

describe('formatClock', () => {
	it.each([
		[0, '00:00'],
		[278_000, '04:38'],
		[HOUR_MS - 1, '59:59'],
		[HOUR_MS, '1:00:00'],
		[3 * HOUR_MS + 12 * MINUTE_MS + 7_000, '3:12:07'],
		[100 * HOUR_MS, '4d 04h'],
		[-5_000, '−00:05']
	])('shows %d ms as %s', (elapsedMs, text) => expect(formatClock(elapsedMs)).toBe(text));
});

describe('formatAfter', () => {
	it.each([
		[38_000, '+38s'],
		[31 * MINUTE_MS + 59_000, '+31m'],
		[3 * HOUR_MS + 12 * MINUTE_MS, '+3h12'],
		[14 * HOUR_MS + 6 * MINUTE_MS, '+14h06'],
		[120 * HOUR_MS, '+5d 00h']
	])('shows %d ms as %s', (spanMs, text) => expect(formatAfter(spanMs)).toBe(text));
});

describe('formatSpan', () => {
	it.each([
		[40_400, '40 s'],
		[12 * MINUTE_MS, '12 min'],
		[3 * HOUR_MS, '3 h'],
		[3 * HOUR_MS + 12 * MINUTE_MS, '3 h 12 min'],
		[50 * HOUR_MS, '2 d 2 h']
	])('shows %d ms as %s', (spanMs, text) => expect(formatSpan(spanMs)).toBe(text));
});

describe('formatOpens', () => {
	const nowMs = Date.parse('2026-12-01T04:12:40Z');
	it('says now for an open window and one that opens within a minute', () => {
		expect(formatOpens('2026-12-01T03:00:00Z', nowMs)).toBe('now');
		expect(formatOpens('2026-12-01T04:13:10Z', nowMs)).toBe('now');
	});
	it('says how long to wait', () => {
		expect(formatOpens('2026-12-01T04:44:50Z', nowMs)).toBe('+32m');
	});
	it('says never without an instant', () => expect(formatOpens(null, nowMs)).toBe('never'));
});
