import { describe, expect, it } from 'vitest';
import { readReferenceCsv } from '../../../../tests/unit/readReference';
import { normaliseDeg, RAD_PER_DEG, type Horizontal } from '../angle';
import { angleBetweenDeg, toVector } from '../vector';
import { instantAt } from './instant';
import { skyAt } from './sunMoon';

const ARCSEC = 1 / 3600;
const rows = readReferenceCsv('altaz.csv').map((row) => ({
	site: {
		latDeg: Number(row.lat_deg),
		lonDeg: Number(row.lon_deg),
		heightM: Number(row.elev_m)
	},
	utcMs: Date.parse(row.utc ?? ''),
	position: { raDeg: Number(row.ra_deg), decDeg: Number(row.dec_deg) },
	value: (column: string) => Number(row[column])
}));

/** Greatest difference over all rows and the row where it happens. */
function worst(of: (row: (typeof rows)[number]) => number): number {
	return rows.reduce((most, row) => Math.max(most, Math.abs(of(row))), 0);
}

const azimuthDifferenceDeg = (a: number, b: number) => normaliseDeg(a - b + 180) - 180;

describe('apparent places against astropy 5.2.1', () => {
	const computed = rows.map((row) => skyAt(row.site, row.utcMs, row.position));
	const at = (row: (typeof rows)[number]) => computed[rows.indexOf(row)]!;

	it('reads all 400 rows', () => {
		expect(rows).toHaveLength(400);
	});

	it('puts every target within 1 arcsecond in altitude and in azimuth on the sky', () => {
		expect(worst((row) => at(row).target.altDeg - row.value('alt_deg'))).toBeLessThan(ARCSEC);
		expect(
			worst(
				(row) =>
					azimuthDifferenceDeg(at(row).target.azDeg, row.value('az_deg')) *
					Math.cos(row.value('alt_deg') * RAD_PER_DEG)
			)
		).toBeLessThan(ARCSEC);
	});

	it('puts the Sun within 2 and the Moon within 15 arcseconds of altitude', () => {
		expect(worst((row) => at(row).sun.altDeg - row.value('sun_alt_deg'))).toBeLessThan(2 * ARCSEC);
		expect(worst((row) => at(row).moon.altDeg - row.value('moon_alt_deg'))).toBeLessThan(
			15 * ARCSEC
		);
	});

	it('puts Sun and Moon as well in azimuth on the sky', () => {
		for (const [body, limitDeg] of [
			['sun', 2 * ARCSEC],
			['moon', 15 * ARCSEC]
		] as const) {
			expect(
				worst(
					(row) =>
						azimuthDifferenceDeg(at(row)[body].azDeg, row.value(`${body}_az_deg`)) *
						Math.cos(row.value(`${body}_alt_deg`) * RAD_PER_DEG)
				)
			).toBeLessThan(limitDeg);
		}
	});

	it('puts the Moon within 15 arcseconds of its distance from the target, seen from the site', () => {
		const direction = ({ altDeg, azDeg }: Horizontal) => toVector({ raDeg: azDeg, decDeg: altDeg });
		expect(
			worst(
				(row) =>
					angleBetweenDeg(direction(at(row).moon), direction(at(row).target)) -
					row.value('moon_sep_topo_deg')
			)
		).toBeLessThan(15 * ARCSEC);
	});

	it('gives the illuminated fraction within 0.0005', () => {
		expect(worst((row) => at(row).moonIlluminated - row.value('moon_illum'))).toBeLessThan(0.0005);
	});

	it('gives local apparent sidereal time within 0.1 seconds', () => {
		const differenceS = worst((row) => {
			const lastDeg = instantAt(row.utcMs).gastRad / RAD_PER_DEG + row.site.lonDeg;
			return azimuthDifferenceDeg(lastDeg, row.value('last_hours') * 15) * 240;
		});
		expect(differenceS).toBeLessThan(0.1);
	});
});
