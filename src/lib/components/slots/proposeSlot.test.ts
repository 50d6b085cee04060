import { describe, expect, it } from 'vitest';
import type { BoardOutlookRow } from '../../domain/board';
import { proposeSlot } from './proposeSlot';

const at = (clock: string) => `2026-12-01T${clock}:00Z`;
const ms = (clock: string) => Date.parse(at(clock));

function row(windows: [string, string][], planMinutes: number): BoardOutlookRow {
	return {
		windows: windows.map(([startAt, endAt]) => ({
			startAt: at(startAt),
			endAt: at(endAt),
			opensBy: 'sun',
			endsBy: 'altitude'
		})),
		tiles: planMinutes > 0 ? [{ startAt: at('04:00'), exposureS: planMinutes * 60 }] : []
	} as unknown as BoardOutlookRow;
}

describe('proposeSlot', () => {
	it('starts now in an open window, for the length of the plan', () => {
		expect(proposeSlot(row([['03:00', '08:00']], 35), [], ms('04:12'))).toEqual({
			startMs: ms('04:12'),
			endMs: ms('04:47')
		});
	});
	it('starts at the opening of one to come', () => {
		expect(proposeSlot(row([['05:30', '08:00']], 20), [], ms('04:12'))?.startMs).toBe(ms('05:30'));
	});
	it('takes at least ten minutes', () => {
		const slot = proposeSlot(row([['03:00', '08:00']], 0), [], ms('04:00'));
		expect(slot).toEqual({ startMs: ms('04:00'), endMs: ms('04:10') });
	});
	it('ends with the window', () => {
		expect(proposeSlot(row([['03:00', '04:30']], 90), [], ms('04:00'))?.endMs).toBe(ms('04:30'));
	});
	it('waits for the one who holds it', () => {
		const held = [{ startAt: at('04:00'), endAt: at('05:00') }];
		expect(proposeSlot(row([['03:00', '08:00']], 30), held, ms('04:10'))).toEqual({
			startMs: ms('05:00'),
			endMs: ms('05:30')
		});
	});
	it('uses a gap before a claim and ends where that begins', () => {
		const held = [{ startAt: at('04:30'), endAt: at('05:00') }];
		expect(proposeSlot(row([['03:00', '08:00']], 60), held, ms('04:00'))).toEqual({
			startMs: ms('04:00'),
			endMs: ms('04:30')
		});
	});
	it('skips a window that is full or too short and takes the next', () => {
		const held = [{ startAt: at('03:00'), endAt: at('04:25') }];
		const windows: [string, string][] = [
			['03:00', '04:30'],
			['20:00', '23:00']
		];
		expect(proposeSlot(row(windows, 30), held, ms('04:00'))?.startMs).toBe(ms('20:00'));
	});
	it('answers null when nothing is left', () => {
		expect(proposeSlot(row([['03:00', '04:05']], 30), [], ms('04:00'))).toBeNull();
		expect(proposeSlot(row([], 30), [], ms('04:00'))).toBeNull();
	});
});
