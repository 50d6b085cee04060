import { describe, expect, it } from 'vitest';
import type { BoardTransient } from '$lib/domain/board';
import { dutyOrder, waitsFor } from './dutyOrder';

const me = { id: '1', name: 'Ada Lund', initials: 'AL' };
const other = { id: '2', name: 'Bo Reyes', initials: 'BR' };
const at = '2026-12-01T04:00:00Z';

function transient(designation: string, more: Partial<BoardTransient> = {}): BoardTransient {
	return {
		designation,
		taken: null,
		decision: null,
		isTest: false,
		...more
	} as BoardTransient;
}
const decided = { decision: 'chase' as const, by: me, at, reason: '' };

describe('dutyOrder', () => {
	it('puts untaken first, then one’s own undecided, then the rest, tests last', () => {
		const order = dutyOrder(
			[
				transient('test', { isTest: true }),
				transient('others', { taken: { by: other, at } }),
				transient('decided', { taken: { by: me, at }, decision: decided }),
				transient('mine', { taken: { by: me, at } }),
				transient('untaken')
			],
			me
		);
		expect(order.map(({ designation }) => designation)).toEqual([
			'untaken',
			'mine',
			'others',
			'decided',
			'test'
		]);
	});
	it('keeps the board’s order among equals', () => {
		const order = dutyOrder([transient('costly'), transient('cheap')], me);
		expect(order.map(({ designation }) => designation)).toEqual(['costly', 'cheap']);
	});
});

describe('waitsFor', () => {
	it('is over when another took it or a decision stands', () => {
		expect(waitsFor(transient('a'), me)).toBe(true);
		expect(waitsFor(transient('a', { taken: { by: me, at } }), me)).toBe(true);
		expect(waitsFor(transient('a', { taken: { by: other, at } }), me)).toBe(false);
		expect(waitsFor(transient('a', { taken: { by: me, at }, decision: decided }), me)).toBe(false);
		expect(waitsFor(transient('a', { isTest: true }), me)).toBe(false);
	});
});
