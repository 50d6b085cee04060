import { roundedUp } from '../header';

/** A column of a test's table; vectors follow each other, row by row. */
export type TestColumn = {
	name: string;
	/** As TFORM has it: `K`, `8E`. */
	form: string;
	values: readonly (number | bigint)[];
};

const WRITERS: Record<
	string,
	[bytes: number, write: (view: DataView, at: number, value: number | bigint) => void]
> = {
	B: [1, (view, at, value) => view.setUint8(at, Number(value))],
	I: [2, (view, at, value) => view.setInt16(at, Number(value))],
	J: [4, (view, at, value) => view.setInt32(at, Number(value))],
	K: [8, (view, at, value) => view.setBigInt64(at, BigInt(value))],
	E: [4, (view, at, value) => view.setFloat32(at, Number(value))],
	D: [8, (view, at, value) => view.setFloat64(at, Number(value))]
};

/** A file of one table, for tests; `cards` are added to its header and may contradict what it holds. */
export function fitsOf(
	columns: readonly TestColumn[],
	cards: Record<string, string | number | bigint> = {}
): Uint8Array {
	const forms = columns.map(({ form, values }) => {
		const repeat = Number(/^\d*/.exec(form)?.[0] || 1);
		const [bytes, write] = WRITERS[form.slice(-1)]!;
		return { repeat, bytes, write, values };
	});
	const rowBytes = forms.reduce((sum, { repeat, bytes }) => sum + repeat * bytes, 0);
	const rowCount = columns.length === 0 ? 0 : columns[0]!.values.length / forms[0]!.repeat;
	const structure: Record<string, string | number | bigint> = {
		XTENSION: 'BINTABLE',
		BITPIX: 8,
		NAXIS: 2,
		NAXIS1: rowBytes,
		NAXIS2: rowCount,
		PCOUNT: 0,
		GCOUNT: 1,
		TFIELDS: columns.length
	};
	columns.forEach(({ name, form }, i) => {
		structure[`TTYPE${i + 1}`] = name;
		structure[`TFORM${i + 1}`] = form;
	});
	const primary = headerBytes({ SIMPLE: true, BITPIX: 8, NAXIS: 0 });
	const table = headerBytes({ ...structure, ...cards });
	const start = primary.length + table.length;
	const file = new Uint8Array(start + roundedUp(rowBytes * rowCount));
	file.set(primary);
	file.set(table, primary.length);
	const view = new DataView(file.buffer, start);
	let offset = 0;
	for (const { repeat, bytes, write, values } of forms) {
		values.forEach((value, i) => {
			write(view, Math.floor(i / repeat) * rowBytes + offset + (i % repeat) * bytes, value);
		});
		offset += repeat * bytes;
	}
	return file;
}

function headerBytes(cards: Record<string, string | number | bigint | boolean>): Uint8Array {
	const lines = Object.entries(cards).map(([keyword, value]) => {
		const written =
			typeof value === 'string'
				? `'${value}'`
				: value === true
					? 'T'
					: value === false
						? 'F'
						: value;
		return `${keyword.padEnd(8)}= ${written}`;
	});
	const bytes = new Uint8Array(roundedUp((lines.length + 1) * 80)).fill(0x20);
	[...lines, 'END'].forEach((line, i) => bytes.set(new TextEncoder().encode(line), i * 80));
	return bytes;
}
