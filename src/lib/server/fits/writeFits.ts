import { BLOCK_BYTES, roundedUp } from './header';

/** A card's value; a comment may follow it. */
export type Card = [keyword: string, value: string | number | bigint | boolean, comment?: string];

/** A column to write: one number a row. */
export type WrittenColumn = { name: string; unit?: string } & (
	{ form: 'K'; values: ArrayLike<bigint | number> } | { form: 'D'; values: ArrayLike<number> }
);

const CARD_BYTES = 80;
const ELEMENT_BYTES = 8;

/** A FITS file (4.0) of an empty primary HDU and one binary table of equally long columns of 8-byte numbers. */
export function writeFits(columns: WrittenColumn[], cards: Card[], remarks: string[]): Uint8Array {
	const rowCount = columns[0]?.values.length ?? 0;
	const rowBytes = ELEMENT_BYTES * columns.length;
	const primary = header([
		['SIMPLE', true],
		['BITPIX', 8],
		['NAXIS', 0],
		['EXTEND', true]
	]);
	const table = header(
		[
			['XTENSION', 'BINTABLE'],
			['BITPIX', 8],
			['NAXIS', 2],
			['NAXIS1', rowBytes],
			['NAXIS2', rowCount],
			['PCOUNT', 0],
			['GCOUNT', 1],
			['TFIELDS', columns.length],
			...columns.flatMap(({ name, form, unit }, i): Card[] => [
				[`TTYPE${i + 1}`, name],
				[`TFORM${i + 1}`, `1${form}`],
				...(unit ? [[`TUNIT${i + 1}`, unit] satisfies Card] : [])
			]),
			...cards
		],
		remarks
	);
	const start = primary.length + table.length;
	const file = new Uint8Array(start + roundedUp(rowBytes * rowCount));
	file.set(primary);
	file.set(table, primary.length);
	const view = new DataView(file.buffer, start);
	columns.forEach((column, place) => {
		for (let row = 0; row < rowCount; row++) {
			const at = row * rowBytes + place * ELEMENT_BYTES;
			const value = column.values[row] ?? 0;
			if (column.form === 'K') view.setBigInt64(at, BigInt(value));
			else view.setFloat64(at, Number(value));
		}
	});
	return file;
}

function header(cards: Card[], remarks: string[] = []): Uint8Array {
	const lines = [
		...cards.map(cardText),
		...remarks.flatMap((remark) => remark.match(/.{1,70}(?:\s|$)/g) ?? []).map(commentText),
		'END'
	];
	const bytes = new Uint8Array(roundedUp(lines.length * CARD_BYTES)).fill(0x20);
	lines.forEach((line, i) => bytes.set(new TextEncoder().encode(line), i * CARD_BYTES));
	if (bytes.length % BLOCK_BYTES !== 0) throw new RangeError('a header is not whole blocks');
	return bytes;
}

function cardText([keyword, value, comment]: Card): string {
	const written =
		typeof value === 'string'
			? `'${printable(value).replaceAll("'", "''").padEnd(8)}'`.padEnd(20)
			: (typeof value === 'boolean' ? (value ? 'T' : 'F') : String(value)).padStart(20);
	const card = `${keyword.padEnd(8)}= ${written}${comment ? ` / ${printable(comment)}` : ''}`;
	// Only a comment may be cut: what is a value here is short.
	return card.slice(0, CARD_BYTES);
}

function commentText(remark: string): string {
	return `COMMENT ${printable(remark.trimEnd())}`;
}

/** Headers are ASCII: other characters become a question mark. */
function printable(text: string): string {
	return text.replace(/[^\x20-\x7e]/g, '?');
}
