import type { Equatorial } from '../sky/angle';
import { sexagesimal } from '../sky/sexagesimal';

/** Right ascension `05h33m36s` and declination `−08°12′00″`, with digits that suit the region's radius. */
export function formatPosition(position: Equatorial, radiusDeg = 1): { ra: string; dec: string } {
	const arcsecDigits = radiusDeg < 10 / 3600 ? 1 : 0;
	const { ra, dec } = sexagesimal(position, arcsecDigits);
	const [h = '', m = '', s = ''] = ra.split(' ');
	const [d = '', arcmin = '', arcsec = ''] = dec.split(' ');
	// A second of time is 15 arcseconds: a wide region's right ascension needs no decimals.
	const seconds = radiusDeg > 0.05 ? s.split('.')[0] : s;
	return {
		ra: `${h}h${m}m${seconds}s`,
		dec: `${d.replace('-', '−')}°${arcmin}′${arcsec}″`
	};
}

/** Both in one line, as telescopes' consoles take it: `05:33:36.0 -08:12:00`. */
export function positionToPaste(position: Equatorial, radiusDeg = 1): string {
	const { ra, dec } = sexagesimal(position, radiusDeg < 10 / 3600 ? 2 : 0);
	return `${ra.replaceAll(' ', ':')} ${dec.replaceAll(' ', ':')}`;
}
