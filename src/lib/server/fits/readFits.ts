import type { BinaryTable } from './binaryTable';
import { FileFault } from './fileFault';
import { readHeader, roundedUp, type Header } from './header';
import { tableColumns } from './tableColumn';

/** What a FITS file holds: its primary header and its binary tables, in order. */
export type FitsFile = { primary: Header; tables: BinaryTable[] };

const HDUS_MAX = 1000;
const XTENSION = [...'XTENSION'].map((letter) => letter.charCodeAt(0));

/** Whether bytes begin as a FITS file does. */
export function isFits(bytes: Uint8Array): boolean {
	return [...'SIMPLE  ='].every((letter, i) => bytes[i] === letter.charCodeAt(0));
}

/**
 * Reads the headers of a FITS file and checks every size against the others and the file's length (FITS 4.0);
 * columns are read from the tables when they are asked for.
 *
 * @throws FileFault naming HDU (the primary is HDU 0), keyword or byte.
 */
export function readFits(bytes: Uint8Array): FitsFile {
	if (!isFits(bytes)) throw new FileFault('byte 0', 'is not the start of a FITS file (SIMPLE =)');
	const primary = readHeader(bytes, 0, 'HDU 0');
	if (primary.logical('SIMPLE') !== true) throw primary.fault('SIMPLE', 'must be T');
	const tables: BinaryTable[] = [];
	let next = endOfData(bytes, primary);
	for (let number = 1; number <= HDUS_MAX && isExtension(bytes, next); number++) {
		const header = readHeader(bytes, next, `HDU ${number}`);
		const end = endOfData(bytes, header);
		if (header.text('XTENSION') === 'BINTABLE') tables.push(tableOf(bytes, header));
		next = end;
	}
	return { primary, tables };
}

function tableOf(bytes: Uint8Array, header: Header): BinaryTable {
	if (header.count('BITPIX', -64, 64) !== 8) throw header.fault('BITPIX', 'must be 8 in a table');
	header.count('NAXIS', 2, 2);
	const rowBytes = header.count('NAXIS1', 0, bytes.length);
	const rowCount = header.count('NAXIS2', 0, Number.MAX_SAFE_INTEGER);
	const columns = tableColumns(header, rowBytes);
	const start = header.dataStart;
	return {
		header,
		rowBytes,
		// Rows of no bytes hold nothing, however many are said to be there.
		rowCount: rowBytes === 0 ? 0 : rowCount,
		columns,
		rows: bytes.subarray(start, start + rowBytes * rowCount)
	};
}

/** Byte after an HDU's data; a fault where the file ends before them. */
function endOfData(bytes: Uint8Array, header: Header): number {
	const most = Number.MAX_SAFE_INTEGER;
	const elementBytes = Math.abs(header.count('BITPIX', -64, 64)) / 8;
	const axes = header.count('NAXIS', 0, 999);
	let elements = axes === 0 ? 0 : 1;
	for (let axis = 1; axis <= axes; axis++) elements *= header.count(`NAXIS${axis}`, 0, most);
	const more = header.has('PCOUNT') ? header.count('PCOUNT', 0, most) : 0;
	const groups = header.has('GCOUNT') ? header.count('GCOUNT', 0, most) : 1;
	const length = elementBytes * groups * (axes === 0 ? 0 : more + elements);
	const has = bytes.length - header.dataStart;
	if (!(length <= has)) {
		throw header.fault(
			axes >= 2 ? 'NAXIS2' : 'NAXIS',
			`asks for ${length} bytes of data; the file has ${Math.max(0, has)} from byte ${header.dataStart}`
		);
	}
	return header.dataStart + roundedUp(length);
}

/** What follows the last HDU and is none is left alone (FITS 4.0, section 3.5). */
function isExtension(bytes: Uint8Array, at: number): boolean {
	return XTENSION.every((byte, i) => bytes[at + i] === byte);
}
