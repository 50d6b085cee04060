import { FileFault } from './fileFault';
import type { Header } from './header';
import type { TableColumn } from './tableColumn';

/** A binary table as it lies in the file. */
export type BinaryTable = {
	header: Header;
	rowBytes: number;
	rowCount: number;
	columns: TableColumn[];
	/** The rows' bytes. */
	rows: Uint8Array;
};

/** The column of a name, whatever its case; null where there is none. */
export function columnNamed(table: BinaryTable, ...names: string[]): TableColumn | null {
	for (const name of names) {
		const found = table.columns.find((column) => column.name.trim().toUpperCase() === name);
		if (found) return found;
	}
	return null;
}

/** Where in a column its element `i` stands, in words for a fault. */
export function elementPlace(table: BinaryTable, column: TableColumn, i: number): string {
	const row = Math.floor(i / column.repeat) + 1;
	const element = column.repeat > 1 ? `, element ${(i % column.repeat) + 1}` : '';
	return `${table.header.place}, column ${column.name}, row ${row}${element}`;
}

/**
 * All elements of a column of numbers, row by row, as doubles (E unscaled as singles, which is exact). 64-bit
 * integers past 2^53 are rounded: `integersOf` reads those exactly.
 */
export function numbersOf(table: BinaryTable, column: TableColumn): Float32Array | Float64Array {
	const { scale, zero, type } = column;
	const plain = scale === 1 && zero === 0;
	const values =
		type === 'E' && plain
			? new Float32Array(table.rowCount * column.repeat)
			: new Float64Array(table.rowCount * column.repeat);
	fill(table, column, values);
	if (!plain) for (let i = 0; i < values.length; i++) values[i] = (values[i] ?? 0) * scale + zero;
	return values;
}

function fill(table: BinaryTable, column: TableColumn, values: Float32Array | Float64Array): void {
	const view = viewOf(table);
	const { repeat, offset, elementBytes, type } = column;
	const each = (read: (at: number) => number) => {
		let i = 0;
		for (let row = 0, at = offset; row < table.rowCount; row++, at += table.rowBytes) {
			for (let k = 0, here = at; k < repeat; k++, here += elementBytes) values[i++] = read(here);
		}
	};
	switch (type) {
		case 'E':
			return each((at) => view.getFloat32(at));
		case 'D':
			return each((at) => view.getFloat64(at));
		case 'B':
			return each((at) => view.getUint8(at));
		case 'I':
			return each((at) => view.getInt16(at));
		case 'J':
			return each((at) => view.getInt32(at));
		case 'K':
			// Two halves, because a bigint for every row would take most of the time.
			return each((at) => view.getInt32(at) * 2 ** 32 + view.getUint32(at + 4));
		default:
			throw notNumbers(table, column);
	}
}

/** All elements of a column of integers, exactly; a column scaled to fractions is a fault. */
export function integersOf(table: BinaryTable, column: TableColumn): bigint[] {
	const { repeat, offset, elementBytes, type, integerZero } = column;
	if (integerZero === null) {
		throw table.header.fault(`TSCAL${column.number}`, `makes fractions of column ${column.name}`);
	}
	const view = viewOf(table);
	const values: bigint[] = [];
	for (let row = 0, start = offset; row < table.rowCount; row++, start += table.rowBytes) {
		for (let k = 0, at = start; k < repeat; k++, at += elementBytes) {
			if (type === 'K') values.push(view.getBigInt64(at) + integerZero);
			else if (type === 'J') values.push(BigInt(view.getInt32(at)) + integerZero);
			else if (type === 'I') values.push(BigInt(view.getInt16(at)) + integerZero);
			else if (type === 'B') values.push(BigInt(view.getUint8(at)) + integerZero);
			else throw notNumbers(table, column, 'whole numbers');
		}
	}
	return values;
}

/** A column of characters, one string a row, without trailing blanks. */
export function stringsOf(table: BinaryTable, column: TableColumn): string[] {
	if (column.type !== 'A') throw notNumbers(table, column, 'text');
	return Array.from({ length: table.rowCount }, (_, row) => {
		const at = row * table.rowBytes + column.offset;
		const text = String.fromCharCode(...table.rows.subarray(at, at + column.repeat));
		return (text.split('\0')[0] ?? '').trimEnd();
	});
}

/** A column of logicals; null where a row holds neither T nor F. */
export function logicalsOf(table: BinaryTable, column: TableColumn): (boolean | null)[] {
	if (column.type !== 'L') throw notNumbers(table, column, 'logicals');
	return Array.from({ length: table.rowCount * column.repeat }, (_, i) => {
		const at = Math.floor(i / column.repeat) * table.rowBytes + column.offset;
		const byte = table.rows[at + (i % column.repeat)];
		return byte === 0x54 ? true : byte === 0x46 ? false : null;
	});
}

function viewOf({ rows }: BinaryTable): DataView {
	return new DataView(rows.buffer, rows.byteOffset, rows.byteLength);
}

function notNumbers(table: BinaryTable, column: TableColumn, wanted = 'numbers'): FileFault {
	return table.header.fault(
		`TFORM${column.number}`,
		`is ${column.repeat}${column.type}; column ${column.name} must hold ${wanted}`
	);
}
