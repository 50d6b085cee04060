import { describe, expect, it } from 'vitest';
import type { Board, BoardTransient } from '../domain/board';
import { mergeBoard } from './mergeBoard';

const transient = (designation: string, revision: number) =>
	({ designation, revision }) as BoardTransient;

const board = (
	revision: number,
	openDesignations: string[],
	transients: BoardTransient[]
): Board => ({
	revision,
	serverNow: '2026-12-01T04:12:40Z',
	openDesignations,
	transients,
	telescopes: [],
	watch: null
});

describe('mergeBoard', () => {
	const held = board(
		7,
		['D26L01-b', 'D26L01-a'],
		[transient('D26L01-b', 7), transient('D26L01-a', 3)]
	);

	it('replaces what changed and keeps the rest', () => {
		const merged = mergeBoard(held, board(8, ['D26L01-b', 'D26L01-a'], [transient('D26L01-a', 8)]));
		expect(merged?.transients.map(({ revision }) => revision)).toEqual([7, 8]);
		expect(merged?.revision).toBe(8);
	});

	it('follows the new order and takes in the new one', () => {
		const merged = mergeBoard(
			held,
			board(9, ['D26L01-c', 'D26L01-a', 'D26L01-b'], [transient('D26L01-c', 9)])
		);
		expect(merged?.transients.map(({ designation }) => designation)).toEqual([
			'D26L01-c',
			'D26L01-a',
			'D26L01-b'
		]);
	});

	it('drops what is no longer open', () => {
		const merged = mergeBoard(held, board(9, ['D26L01-a'], []));
		expect(merged?.transients).toHaveLength(1);
	});

	it('asks for the whole board when a transient is missing', () => {
		expect(mergeBoard(held, board(9, ['D26L01-z'], []))).toBeNull();
	});

	it('asks for the whole board when the revision went back', () => {
		expect(mergeBoard(held, board(2, ['D26L01-a'], []))).toBeNull();
	});
});
