import { describe, expect, it } from 'vitest';
import fixture from '../../../fixtures/sky/frames.json';
import { fromGalactic, toGalactic } from './galactic';
import { angleBetweenDeg, toVector } from './vector';

const MAS_DEG = 1 / 3_600_000;

describe('galactic coordinates', () => {
	it.each(fixture.points)('are ERFA’s at $ra $dec, there and back', (row) => {
		const icrs = toVector({ raDeg: row.ra, decDeg: row.dec });
		const galactic = toVector({ raDeg: row.erfa_icrs2g_l, decDeg: row.erfa_icrs2g_b });
		expect(angleBetweenDeg(toGalactic(icrs), galactic)).toBeLessThan(0.1 * MAS_DEG);
		expect(angleBetweenDeg(fromGalactic(galactic), icrs)).toBeLessThan(0.1 * MAS_DEG);
	});

	it('differ from astropy’s, which goes by way of FK5, by 40 mas at most', () => {
		for (const row of fixture.points) {
			const icrs = toVector({ raDeg: row.ra, decDeg: row.dec });
			const astropy = toVector({ raDeg: row.gal_l, decDeg: row.gal_b });
			expect(angleBetweenDeg(toGalactic(icrs), astropy)).toBeLessThan(40 * MAS_DEG);
		}
	});
});
