import { normaliseDeg, type Equatorial } from './angle';
import { sexagesimal } from './sexagesimal';

/** Decimals of seconds of arc (0 to 4) that a position known to `radiusDeg` deserves: a tenth of the radius. */
export function arcsecDigitsFor(radiusDeg: number): number {
	const wanted = Math.ceil(-Math.log10((radiusDeg * 3600) / 10));
	return Number.isFinite(wanted) ? Math.min(4, Math.max(0, wanted)) : 0;
}

/**
 * Position as a person reads it, `05h33m36s` and `−08°12′00″`, ICRS; right ascension gets the decimals that
 * match `arcsecDigits` of declination (0 to 4), one second of time being 15 of arc: none for 0.
 */
export function formatPosition(
	position: Equatorial,
	arcsecDigits = 0
): { ra: string; dec: string } {
	const { dec } = sexagesimal(position, arcsecDigits);
	const decFields = dec.replace('-', '−').split(' ');
	const raFields = raText(position.raDeg, arcsecDigits === 0 ? 0 : arcsecDigits + 1).split(' ');
	return {
		ra: `${raFields[0]}h${raFields[1]}m${raFields[2]}s`,
		dec: `${decFields[0]}°${decFields[1]}′${decFields[2]}″`
	};
}

/**
 * Reads a position pasted whole: right ascension, then declination, in any of the usual forms
 * (`05h33m36s −08°12′00″`, `05:33:36.1, -8:12:00`, `05 33 36 -08 12 00`, `83.4 -8.2`). Three numbers of right
 * ascension are hours; a single one is degrees unless marked h. Null when it can't be read or is out of range.
 */
export function parsePosition(text: string): Equatorial | null {
	const read = parseUnfolded(text);
	if (!read || read.raDeg < 0 || Object.is(read.raDeg, -0) || read.raDeg > 360) return null;
	return { raDeg: normaliseDeg(read.raDeg), decDeg: read.decDeg };
}

/** As `parsePosition`, but right ascension is left as written, −3600 to 3600 degrees: who folds it can say so. */
export function parseUnfolded(text: string): Equatorial | null {
	const plain = text
		.trim()
		.toLowerCase()
		.replace(/[−–—]/g, '-')
		.replace(/\b(ra|dec|de|j2000|icrs)\b/g, ' ')
		.replace(/[=,;/()]/g, ' ')
		.trim();
	const halves = splitHalves(plain);
	if (!halves) return null;
	const ra = readAngle(halves.ra);
	const dec = readAngle(halves.dec);
	if (!ra || !dec || dec.hours) return null;
	const size = ra.hours || ra.fields > 1 ? ra.value * 15 : ra.value;
	if (size > 3600 || dec.value > 90) return null;
	return { raDeg: ra.negative ? -size : size, decDeg: dec.negative ? -dec.value : dec.value };
}

/** Declination starts at its sign, or else halfway through the numbers. */
function splitHalves(plain: string): { ra: string; dec: string } | null {
	const sign = plain.slice(1).search(/[+-]/);
	if (sign >= 0) return { ra: plain.slice(0, sign + 1), dec: plain.slice(sign + 1) };
	const numbers = [...plain.matchAll(/\d+(\.\d+)?/g)];
	const middle = numbers[numbers.length / 2];
	if (numbers.length % 2 !== 0 || middle?.index === undefined) return null;
	return { ra: plain.slice(0, middle.index), dec: plain.slice(middle.index) };
}

const UNIT_MARKS = /^[\s:hmsdr°º'"′″’”]*$/;

function readAngle(
	text: string
): { value: number; negative: boolean; fields: number; hours: boolean } | null {
	const match = /^\s*([+-]?)\s*(.*)$/.exec(text);
	const body = match?.[2] ?? '';
	const numbers = body.match(/\d+(\.\d*)?|\.\d+/g);
	if (!numbers || numbers.length > 3) return null;
	if (!UNIT_MARKS.test(body.replace(/\d+(\.\d*)?|\.\d+/g, ''))) return null;
	const [whole = 0, minutes = 0, seconds = 0] = numbers.map(Number);
	if (minutes >= 60 || seconds >= 60) return null;
	// Only the last field may have decimals.
	if (numbers.slice(0, -1).some((field) => field.includes('.'))) return null;
	return {
		value: whole + minutes / 60 + seconds / 3600,
		negative: match?.[1] === '-',
		fields: numbers.length,
		hours: body.includes('h')
	};
}

function raText(raDeg: number, secondDigits: number): string {
	const scale = 10 ** secondDigits;
	// Whole units first, so that no field shows 60.
	const units = Math.round((normaliseDeg(raDeg) / 15) * 3600 * scale) % (86_400 * scale);
	const minutes = Math.floor(units / (60 * scale));
	const seconds = (units - minutes * 60 * scale) / scale;
	const two = (value: number) => String(value).padStart(2, '0');
	const width = secondDigits > 0 ? 3 + secondDigits : 2;
	return [
		two(Math.floor(minutes / 60)),
		two(minutes % 60),
		seconds.toFixed(secondDigits).padStart(width, '0')
	].join(' ');
}
