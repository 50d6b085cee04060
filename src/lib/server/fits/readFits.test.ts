import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { columnNamed, integersOf, numbersOf } from './binaryTable';
import { FileFault } from './fileFault';
import { readFits } from './readFits';
import { fitsOf } from './testing/fitsOf';
import { writeFits } from './writeFits';

const fixture = (name: string) => new Uint8Array(readFileSync(`fixtures/fits/${name}`));
const integers = (bytes: Uint8Array, name: string) => {
	const table = readFits(bytes).tables[0]!;
	return integersOf(table, columnNamed(table, name)!);
};
const numbers = (bytes: Uint8Array, name: string) => {
	const table = readFits(bytes).tables[0]!;
	return [...numbersOf(table, columnNamed(table, name)!)];
};

function faultOf(bytes: Uint8Array): string {
	try {
		readFits(bytes);
	} catch (error) {
		if (error instanceof FileFault) return error.message;
		throw error;
	}
	return '';
}

describe('integers of 64 bits', () => {
	it('are exact, as astropy wrote them', () => {
		// fixtures/scripts/make_fits.py, astropy 5.2.1.
		const bytes = fixture('int64_edge.fits');
		expect(integers(bytes, 'UNIQ')).toEqual([
			4n * 4n ** 29n + 12n * 4n ** 29n - 1n,
			4n * 4n ** 27n + 12345678901234567n,
			4n * 4n ** 29n
		]);
		expect(numbers(bytes, 'PROBDENSITY')).toEqual([1.5, 2.5, -3.25]);
	});

	it('are exact when they are unsigned, with TZERO 2^63, however that is written', () => {
		const stored = [-(2n ** 63n), 0n, 2n ** 63n - 1n];
		for (const TZERO1 of [2n ** 63n, '9.223372036854775808E18']) {
			const bytes = fitsOf([{ name: 'ID', form: 'K', values: stored }], { TZERO1: 0 });
			const text = new TextDecoder('latin1').decode(bytes);
			const at = text.indexOf('TZERO1');
			bytes.set(new TextEncoder().encode(`TZERO1  = ${TZERO1}`), at);
			expect(integers(bytes, 'ID')).toEqual([0n, 2n ** 63n, 2n ** 64n - 1n]);
		}
	});
});

describe('a table', () => {
	it('of every kind of number, scaled and in vectors, is read', () => {
		const bytes = fitsOf(
			[
				{ name: 'B', form: 'B', values: [0, 255] },
				{ name: 'I', form: 'I', values: [-32768, 32767] },
				{ name: 'J', form: '2J', values: [1, 2, 3, -4] },
				{ name: 'E', form: 'E', values: [0.5, -0.25] }
			],
			{ TZERO1: -128, TSCAL4: 2, TZERO4: 1 }
		);
		expect(numbers(bytes, 'B')).toEqual([-128, 127]);
		expect(numbers(bytes, 'I')).toEqual([-32768, 32767]);
		expect(numbers(bytes, 'J')).toEqual([1, 2, 3, -4]);
		expect(numbers(bytes, 'E')).toEqual([2, 0.5]);
		expect(integers(bytes, 'J')).toEqual([1n, 2n, 3n, -4n]);
	});

	it('that we write is what we read, with long texts and quotes', () => {
		const bytes = writeFits(
			[
				{ name: 'UNIQ', form: 'K', values: [2n ** 62n, 7n] },
				{ name: 'PROBDENSITY', form: 'D', unit: 'sr-1', values: [Math.PI, 0] }
			],
			[['OBJECT', "it's"]],
			[
				'A remark that is long enough to need more than one card of eighty characters in the header.'
			]
		);
		expect(integers(bytes, 'UNIQ')).toEqual([2n ** 62n, 7n]);
		expect(numbers(bytes, 'PROBDENSITY')).toEqual([Math.PI, 0]);
		expect(readFits(bytes).tables[0]!.header.text('OBJECT')).toBe("it's");
		expect(bytes.length % 2880).toBe(0);
	});
});

describe('a file that lies or is cut off', () => {
	const columns = [{ name: 'X', form: 'D', values: [1, 2, 3] }];
	const whole = fitsOf(columns);

	it.each<[string, Record<string, string | number | bigint>, RegExp]>([
		[
			'too many rows',
			{ NAXIS2: 1000 },
			/^HDU 1, NAXIS2 asks for 8000 bytes of data; the file has 2880/
		],
		['rows beyond all measure', { NAXIS2: 10n ** 15n }, /^HDU 1, NAXIS2 asks for/],
		[
			'rows that no number holds',
			{ NAXIS2: 10n ** 30n },
			/^HDU 1, NAXIS2 is 1000000000000000000000000000000;/
		],
		['less than none', { NAXIS2: -1 }, /^HDU 1, NAXIS2 is -1/],
		['wider rows', { NAXIS1: 16 }, /^HDU 1, NAXIS1 is 16; the columns' TFORM add up to 8 bytes/],
		['an unknown form', { TFORM1: '1Z' }, /^HDU 1, TFORM1 is '1Z'/],
		['a form without end', { TFORM1: '9999999999D' }, /^HDU 1, NAXIS1 is 8/],
		['too many fields', { TFIELDS: 2 }, /^HDU 1, TFORM2 is missing/],
		['a number in quotes', { NAXIS2: '3' }, /^HDU 1, NAXIS2 must be a number/],
		['a heap that is not there', { PCOUNT: 10n ** 9n }, /^HDU 1, NAXIS2 asks for 1000000024 bytes/]
	])('says %s and is refused by name', (_name, cards, expected) => {
		expect(faultOf(fitsOf(columns, cards))).toMatch(expected);
	});

	it('is refused wherever it is cut, or has fewer tables; never anything worse', () => {
		for (let length = 0; length < whole.length; length += 37) {
			const cut = whole.slice(0, length);
			const fault = faultOf(cut);
			if (fault === '') expect(readFits(cut).tables.length).toBeLessThanOrEqual(1);
			else expect(fault).toMatch(/^(HDU|byte) \d/);
		}
		expect(faultOf(whole.slice(0, 3000))).toMatch(/^HDU 1 has no END: the file ends at byte 3000/);
	});

	it('with other bytes in its header is refused by their place', () => {
		const bytes = whole.slice();
		bytes[2880 + 100] = 0x07;
		expect(faultOf(bytes)).toMatch(/^HDU 1 has a byte in its header, at 2980,/);
	});
});

it('joins strings over CONTINUE cards', () => {
	const bytes = fitsOf([], { LONG: 'abc&', AFTER: 1 });
	const at = new TextDecoder('latin1').decode(bytes).indexOf('AFTER');
	bytes.set(new TextEncoder().encode("CONTINUE  'def''g'  "), at);
	expect(readFits(bytes).tables[0]!.header.text('LONG')).toBe("abcdef'g");
});
