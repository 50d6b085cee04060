import { expect, test } from 'vitest';
import { gapsIn } from './watch';

const span = { startMs: 0, endMs: 100 };

test('an empty rota is one gap', () => {
	expect(gapsIn(span, [])).toEqual([span]);
});

test('gaps lie before, between and after watches given in any order', () => {
	const watches = [
		{ startMs: 50, endMs: 60 },
		{ startMs: 10, endMs: 30 },
		{ startMs: 30, endMs: 40 }
	];
	expect(gapsIn(span, watches)).toEqual([
		{ startMs: 0, endMs: 10 },
		{ startMs: 40, endMs: 50 },
		{ startMs: 60, endMs: 100 }
	]);
});

test('watches that reach over both ends leave no gap', () => {
	expect(gapsIn(span, [{ startMs: -20, endMs: 120 }])).toEqual([]);
});
