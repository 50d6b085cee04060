import { pix2vec_nest } from '@hscmap/healpix';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import fixture from '../../../../fixtures/sky/healpix.json';
import { arbitraryPosition, seededDraws } from '../testing/arbitraryPosition';
import { angleBetweenDeg, separationDeg, toEquatorial, toVector } from '../vector';
import { interleave, locate } from './deepCell';
import {
	cellAreaSr,
	cellCentre,
	cellCorners,
	cellMocRange,
	cellPoint,
	cellRadiusRad,
	cellVector,
	fromUniq,
	MOC_ORDER,
	orderForSide,
	pixelAt,
	pixelAtMocOrder,
	toUniq
} from './healpix';

describe('HEALPix indices', () => {
	it.each(fixture.directions)('are healpy’s at $lon $lat, nside 1 to 2^20', (row) => {
		const position = { raDeg: row.lon, decDeg: row.lat };
		fixture.nsides.forEach((nside, i) => {
			if (row.edge[i]) return;
			expect(pixelAt(Math.log2(nside), position)).toBe(row.nest[i]);
			const { face, x, y } = locate(nside, position);
			expect(face * nside * nside + interleave(x, y)).toBe(row.nest[i]);
		});
	});

	it('leaves hardly any direction out as lying on a border', () => {
		const tested = fixture.directions.flatMap((row) => row.edge.filter((edge) => !edge));
		expect(tested.length).toBeGreaterThan(430);
	});

	it('reads all 100 directions, 30 centres and 6 discs', () => {
		expect(fixture.directions).toHaveLength(100);
		expect(fixture.pixel_centres).toHaveLength(30);
		expect(fixture.discs).toHaveLength(6);
	});

	it.each(fixture.pixel_centres)('has healpy’s centre of $pix at nside $nside', (row) => {
		const [raDeg = NaN, decDeg = NaN] = row.nest_lonlat;
		const centre = cellCentre(Math.log2(row.nside), row.pix);
		expect(separationDeg(centre, { raDeg, decDeg })).toBeLessThan(1e-12);
	});

	it.each(fixture.discs)('selects healpy’s centres within $radius_deg° of $lon $lat', (disc) => {
		const order = Math.log2(disc.nside);
		const axis = toVector({ raDeg: disc.lon, decDeg: disc.lat });
		const inside: number[] = [];
		let touching = 0;
		const visit = (at: number, pixel: number) => {
			const distanceDeg = angleBetweenDeg(cellVector(at, pixel), axis);
			if (distanceDeg > disc.radius_deg + (cellRadiusRad(at) * 180) / Math.PI) return;
			if (at < order) for (let child = 0; child < 4; child++) visit(at + 1, 4 * pixel + child);
			else {
				touching++;
				if (distanceDeg <= disc.radius_deg) inside.push(pixel);
			}
		};
		for (let pixel = 0; pixel < 12; pixel++) visit(0, pixel);
		expect(inside).toEqual([...disc.centres_nest].sort((a, b) => a - b));
		expect(touching).toBeGreaterThanOrEqual(disc.truly_overlapping_ring.length);
	});

	it('gives the library’s centres at its own orders', () => {
		const draw = seededDraws(5);
		for (let i = 0; i < 500; i++) {
			const order = Math.floor(draw() * 14);
			const pixel = Math.floor(draw() * 12 * 4 ** order);
			const [x, y, z] = pix2vec_nest(2 ** order, pixel);
			expect(angleBetweenDeg(cellVector(order, pixel), { x, y, z })).toBeLessThan(
				2e-6 / 2 ** order + 1e-7
			);
		}
	});

	it('finds every cell again from its centre, orders 0 to 24', () => {
		const draw = seededDraws(7);
		for (let i = 0; i < 3000; i++) {
			const order = Math.floor(draw() * 25);
			const pixel = Math.floor(draw() * 12 * 4 ** order);
			expect(pixelAt(order, cellCentre(order, pixel))).toBe(pixel);
		}
	});

	it('nests: the cell at one order holds the cell at the next', () => {
		fc.assert(
			fc.property(arbitraryPosition, fc.integer({ min: 14, max: 23 }), (position, order) => {
				expect(Math.floor(pixelAt(order + 1, position) / 4)).toBe(pixelAt(order, position));
				const [start, end] = cellMocRange(order, pixelAt(order, position));
				const finest = pixelAtMocOrder(position);
				expect(finest >= start && finest < end).toBe(true);
			})
		);
	});

	it('has corners around the centre, the same by both ways', () => {
		for (const [order, pixel] of [
			[0, 4],
			[3, 77],
			[9, 100_000],
			[13, 700_000_000]
		] as const) {
			const reachDeg = (cellRadiusRad(order) * 180) / Math.PI;
			const own = [cellPoint(order, pixel, 1, 1), cellPoint(order, pixel, 0, 1)];
			const corners = cellCorners(order, pixel);
			own.forEach((corner, i) => {
				expect(angleBetweenDeg(corner, corners[i] ?? corner)).toBeLessThan(1e-7);
			});
			for (const corner of corners) {
				expect(angleBetweenDeg(corner, cellVector(order, pixel))).toBeLessThanOrEqual(
					reachDeg * (1 + 1e-9)
				);
			}
		}
	});
});

describe('UNIQ numbers and orders', () => {
	it('come back from every order, first and last cell', () => {
		for (let order = 0; order <= 24; order++) {
			for (const pixel of [0, 12 * 4 ** order - 1]) {
				expect(fromUniq(toUniq(order, pixel))).toEqual({ order, pixel });
			}
		}
	});

	it('cover the sky at order 29', () => {
		expect(cellMocRange(0, 11)[1]).toBe(12n << BigInt(2 * MOC_ORDER));
		expect(cellAreaSr(0) * 12).toBeCloseTo(4 * Math.PI, 12);
	});

	it('picks the coarsest order that is fine enough', () => {
		expect(orderForSide(58.7)).toBe(0);
		expect(orderForSide(58.6)).toBe(1);
		expect(orderForSide(1e-12)).toBe(24);
	});

	it('names what is wrong', () => {
		expect(() => fromUniq(3)).toThrow(/uniq is 3/);
		expect(() => fromUniq(2 ** 53)).toThrow(/uniq is/);
		expect(() => cellCentre(2, 192)).toThrow(/pixel is 192/);
		expect(() => pixelAt(25, { raDeg: 0, decDeg: 0 })).toThrow(/order is 25/);
		expect(toEquatorial(cellVector(0, 4)).raDeg).toBeCloseTo(0, 12);
	});
});
