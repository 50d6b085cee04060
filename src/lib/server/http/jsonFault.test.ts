import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseJson } from './api';
import { jsonFaultIndex } from './jsonFault';

describe('where a text stops being JSON', () => {
	it.each([
		['', 0],
		['{', 1],
		['{"a": 1,}', 8],
		['{"a" 1}', 5],
		['[1, 2', 5],
		['[1 2]', 3],
		['[NaN]', 1],
		['[1e999, -0]', null],
		['[01]', 2],
		['"a\nb"', 0],
		['{"a": "\\x"}', 6],
		['{} {}', 3],
		[' [ ] ', null],
		['{1: 2}', 1],
		['[}', 1]
	])('%j: %s', (text, index) => {
		expect(jsonFaultIndex(text)).toBe(index);
	});

	it('agrees with JSON.parse about what is JSON', () => {
		const pieces = ['{', '}', '[', ']', ',', ':', '"a"', '1', 'null', ' ', 'tru', '-', '.5', '1e5'];
		fc.assert(
			fc.property(fc.array(fc.constantFrom(...pieces), { maxLength: 9 }), (parts) => {
				const text = parts.join('');
				let isJson = true;
				try {
					JSON.parse(text);
				} catch {
					isJson = false;
				}
				expect(jsonFaultIndex(text) === null).toBe(isJson);
			}),
			{ numRuns: 3000, seed: 7 }
		);
	});

	it('is told by the byte, past letters of several bytes and a byte-order mark', () => {
		const body = Buffer.from('\ufeff{"å": x}');
		expect(() => parseJson(body)).toThrow(/byte 10\b/);
		const cut = Buffer.concat([Buffer.from('{"å": "'), Buffer.from([0xc3])]);
		expect(() => parseJson(cut)).toThrow(/UTF-8 from byte 8/);
	});
});
