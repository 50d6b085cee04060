import { readFileSync } from 'node:fs';
import { gzipSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { cellAreaDeg2, cellAreaSr, fromUniq } from '../../sky/healpix/healpix';
import { jointRegion } from '../../sky/regions/jointRegion';
import { FileFault } from '../fits/fileFault';
import { fitsOf, type TestColumn } from '../fits/testing/fitsOf';
import { readSkyFile } from './readSkyFile';

// Made by astropy 5.2.1 and healpy 1.16.1 (fixtures/scripts/make_fits.py).
const fixture = (path: string) => new Uint8Array(readFileSync(`fixtures/${path}`));
// IVOA MOC 2.0, sections 4.3.2 and appendix.
const standard = JSON.parse(readFileSync('fixtures/sky/moc-2.0-examples.json', 'utf8')) as {
	ascii_smoc: string;
	ascii_stmoc: string;
	json_smoc: string;
	derived: { area_deg2: number; nuniq: number[] };
};
const bytesOf = (text: string) => new TextEncoder().encode(text);

function faultOf(bytes: Uint8Array): string {
	try {
		readSkyFile(bytes);
	} catch (error) {
		if (error instanceof FileFault) return error.message;
		throw error;
	}
	return '';
}

describe('a multi-order map', () => {
	it('of a Gaussian of 3° has the areas that numpy finds, whole or compressed', () => {
		const bytes = fixture('sky/mo_gauss3deg.fits');
		const shape = readSkyFile(bytes);
		const region = jointRegion([shape]);
		expect(region.area90Deg2).toBeCloseTo(130.195, -1);
		expect(Math.abs(region.area90Deg2 / 130.195 - 1)).toBeLessThan(0.005);
		expect(Math.abs(region.area50Deg2 / 39.24 - 1)).toBeLessThan(0.01);
		expect(readSkyFile(gzipSync(bytes))).toEqual(shape);
	});

	it('of PROB takes it as what each cell holds', () => {
		const columns: TestColumn[] = [
			{ name: 'UNIQ', form: 'K', values: [4n, 20n, 21n] },
			{ name: 'PROB', form: 'D', values: [0.5, 0.25, 0.25] }
		];
		const shape = readSkyFile(fitsOf(columns, { ORDERING: 'NUNIQ', COORDSYS: 'C' }));
		expect(shape.uniq).toEqual([4, 20, 21]);
		expect(shape.density[0]! * cellAreaSr(0)).toBeCloseTo(0.5, 6);
		expect(shape.density[1]! * cellAreaSr(1)).toBeCloseTo(0.25, 6);
	});
});

describe('a map of one order', () => {
	const ramp = Array.from({ length: 48 }, (_, i) => i);

	it('NESTED, 1024 to a row, as healpy writes it', () => {
		const shape = readSkyFile(fixture('fits/implicit_nest8.fits'));
		const total = (767 * 768) / 2;
		const held = new Map(shape.uniq.map((uniq, i) => [uniq, shape.density[i]!]));
		for (const pixel of [1, 77, 767]) {
			expect(held.get(256 + pixel)! * cellAreaSr(3)).toBeCloseTo(pixel / total, 8);
		}
		expect(held.has(256)).toBe(false);
	});

	it('in RING order and as a list of pixels says the same', () => {
		const cards = { NSIDE: 2, COORDSYS: 'C' };
		const ring = fitsOf([{ name: 'PROB', form: '8E', values: ramp }], {
			...cards,
			ORDERING: 'RING'
		});
		const shape = readSkyFile(ring);
		const list: TestColumn[] = [
			{ name: 'PIXEL', form: 'J', values: [...ramp].reverse() },
			{ name: 'SIGNAL', form: 'D', values: [...ramp].reverse() }
		];
		const scheme = { INDXSCHM: 'EXPLICIT', ORDERING: 'RING' };
		expect(readSkyFile(fitsOf(list, { ...cards, ...scheme }))).toEqual(shape);
		// healpy 1.16.1: ring2nest(2, [0, 47]) = [3, 44].
		const last = shape.uniq.indexOf(16 + 44);
		expect(shape.density[last]! * cellAreaSr(1)).toBeCloseTo(47 / (24 * 47), 7);
	});

	it.each<[string, number[], Record<string, string | number>, RegExp]>([
		['a negative pixel', [...ramp.slice(0, 47), -1], {}, /^HDU 1, column PROB, row 48 is -1;/],
		['no number', [NaN, ...ramp.slice(1)], {}, /^HDU 1, column PROB, row 1 is NaN;/],
		['nothing in it', ramp.map(() => 0), {}, /^HDU 1, column PROB is 0 everywhere/],
		['ecliptic coordinates', ramp, { COORDSYS: 'E' }, /^HDU 1, COORDSYS is 'E'; only C/],
		['another nside', ramp, { NSIDE: 4 }, /^HDU 1, NSIDE is 4, of 192 pixels; there are 48/],
		['no power of two', ramp, { NSIDE: 3 }, /^HDU 1, NSIDE is 3; it must be a power of 2/],
		['an order of its own', ramp, { ORDERING: 'HILBERT' }, /^HDU 1, ORDERING is 'HILBERT'/]
	])('with %s is refused by name', (_name, values, changed, expected) => {
		const cards = { ORDERING: 'NESTED', NSIDE: 2, COORDSYS: 'C', ...changed };
		expect(faultOf(fitsOf([{ name: 'PROB', form: 'D', values }], cards))).toMatch(expected);
	});
});

describe('a coverage map', () => {
	const cells = standard.derived.nuniq;
	const files: [string, Uint8Array][] = [
		['NUNIQ of 32 bits', fixture('fits/moc_std_example_nuniq.fits')],
		['NUNIQ of 64 bits', fixture('fits/moc_std_example_nuniq_K.fits')],
		['RANGE', fixture('fits/moc_std_example_range.fits')],
		['ASCII', bytesOf(standard.ascii_smoc)],
		['JSON', bytesOf(standard.json_smoc)]
	];

	it.each(files)('as %s is the standard’s example, even inside', (_form, bytes) => {
		const { uniq, density } = readSkyFile(bytes);
		// 17, 18 and so on; 85 and 87 and 89 stay, as no four siblings are there.
		expect([...uniq].sort((a, b) => a - b)).toEqual(cells);
		const area = uniq.reduce((sum, cell) => sum + cellAreaDeg2(fromUniq(cell).order), 0);
		expect(area).toBeCloseTo(standard.derived.area_deg2, 3);
		for (const value of density) expect(value).toBe(density[0]);
	});

	it('keeps the digits of order 29 in JSON', () => {
		// The last two cells of the sky at order 29, whose indices are no doubles.
		const last = 12n * 4n ** 29n - 1n;
		const { uniq } = readSkyFile(bytesOf(`{"29":[${last - 1n},${last}]}`));
		expect(uniq).toEqual([16 * 4 ** 24 - 1]);
	});

	it.each<[string, string, RegExp]>([
		['with times', standard.ascii_stmoc, /^byte 0, 't61\/' is neither/],
		['with an index past its order', '1/4 48', /^byte 4, '48' must be less than 48/],
		['with no order', '12 13', /^byte 0, '12' stands before any order/],
		['of nothing', '3/', /^coverage map is empty/],
		['of an order that is none', '{"30":[1]}', /^\/30 must be an order from 0 to 29/],
		['of a half cell', '{"3":[1.5]}', /^\/3\/0 must be a whole number/],
		['cut off', '{"3":[1', /^JSON can't be read/],
		['of other text', 'hello', /^byte 0, 'hello' is neither/]
	])('%s is refused by its place', (_name, text, expected) => {
		expect(faultOf(bytesOf(text))).toMatch(expected);
	});
});

describe('a coverage map without end', () => {
	it('is refused before it is read', () => {
		const values = new Array<number>(2_000_002).fill(0);
		const table = fitsOf([{ name: 'RANGE', form: 'K', values }], { ORDERING: 'RANGE' });
		expect(faultOf(table)).toMatch(/^HDU 1, NAXIS2 makes 2000002 numbers; at most 2000000/);
		expect(faultOf(bytesOf(`1/${'1 '.repeat(3_000_000)}`))).toMatch(/^byte 0 is not the start/);
	});
});

describe('a file', () => {
	it('that inflates to far more than its size is refused while it inflates', () => {
		const bomb = gzipSync(new Uint8Array(80 * 1024 * 1024));
		expect(faultOf(bomb)).toMatch(/^gzip inflates to more than 64 MiB/);
	});

	it.each<[string, Uint8Array, RegExp]>([
		['of no bytes', new Uint8Array(), /^byte 0 is missing: the file is empty/],
		['of other bytes', Uint8Array.of(0x50, 0x4b, 3, 4), /^byte 2 is no text/],
		['of gzip cut off', gzipSync(bytesOf('1/1 2 4')).subarray(0, 15), /^gzip can't be inflated/]
	])('%s is refused', (_name, bytes, expected) => {
		expect(faultOf(bytes)).toMatch(expected);
	});
});
