import { normaliseDeg, type Equatorial } from './angle';

/** Right ascension as hours, minutes, seconds and declination as degrees, minutes, seconds of arc. */
export type Sexagesimal = { ra: string; dec: string };

/**
 * Position in sexagesimal form, `05 33 12.4` and `-08 12 03`, rounded once so that no field shows 60.
 * `arcsecDigits` decimals of declination seconds (0 to 4); right ascension gets one more, as a second
 * of time is 15 seconds of arc. ICRS, degrees in.
 */
export function sexagesimal({ raDeg, decDeg }: Equatorial, arcsecDigits = 0): Sexagesimal {
	const raScale = 10 ** (arcsecDigits + 1);
	const dayUnits = 86_400 * raScale;
	const raUnits = Math.round((normaliseDeg(raDeg) / 15) * 3600 * raScale) % dayUnits;
	const decUnits = Math.round(Math.abs(decDeg) * 3600 * 10 ** arcsecDigits);
	const sign = decDeg < 0 && decUnits > 0 ? '-' : '+';
	return {
		ra: fields(raUnits, arcsecDigits + 1),
		dec: sign + fields(decUnits, arcsecDigits)
	};
}

/** Three fields from a whole number of seconds × 10^digits. */
function fields(units: number, digits: number): string {
	const scale = 10 ** digits;
	const whole = Math.floor(units / scale);
	const fraction = units - whole * scale;
	const two = (value: number) => String(value).padStart(2, '0');
	const seconds =
		two(whole % 60) + (digits > 0 ? `.${String(fraction).padStart(digits, '0')}` : '');
	return `${two(Math.floor(whole / 3600))} ${two(Math.floor(whole / 60) % 60)} ${seconds}`;
}
