import type { Header } from './header';

/** Bytes of one element by its letter (FITS 4.0, table 18); a bit array is counted in bytes below. */
const ELEMENT_BYTES = {
	L: 1,
	X: 1,
	B: 1,
	I: 2,
	J: 4,
	K: 8,
	A: 1,
	E: 4,
	D: 8,
	C: 8,
	M: 16,
	P: 8,
	Q: 16
};

export type ElementType = keyof typeof ELEMENT_BYTES;

/** A column of a binary table: `repeat` elements of one type from byte `offset` of each row. */
export type TableColumn = {
	/** Counted from 1, as in its keywords. */
	number: number;
	name: string;
	type: ElementType;
	repeat: number;
	offset: number;
	elementBytes: number;
	/** Physical value = stored · scale + zero. */
	scale: number;
	zero: number;
	/** The same exactly, where the scale is 1 and zero whole. */
	integerZero: bigint | null;
};

/** The columns that a table's header describes, checked against the row's length. */
export function tableColumns(header: Header, rowBytes: number): TableColumn[] {
	const count = header.count('TFIELDS', 0, 999);
	const columns: TableColumn[] = [];
	let offset = 0;
	for (let number = 1; number <= count; number++) {
		const keyword = `TFORM${number}`;
		const form = header.text(keyword);
		if (form === null) throw header.fault(keyword, 'is missing');
		const match = /^\s*(\d{0,10})([A-Za-z])/.exec(form);
		const type = (match?.[2] ?? '').toUpperCase();
		if (!match || !isElementType(type)) {
			throw header.fault(keyword, `is '${form}'; it must be a count and one of LXBIJKAEDCMPQ`);
		}
		const repeat = match[1] ? Number(match[1]) : 1;
		const elementBytes = ELEMENT_BYTES[type];
		columns.push({
			number,
			name: header.text(`TTYPE${number}`) ?? `column ${number}`,
			type,
			repeat,
			offset,
			elementBytes,
			...scaling(header, number, type)
		});
		offset += type === 'X' ? Math.ceil(repeat / 8) : repeat * elementBytes;
	}
	if (offset !== rowBytes) {
		throw header.fault('NAXIS1', `is ${rowBytes}; the columns' TFORM add up to ${offset} bytes`);
	}
	return columns;
}

function isElementType(letter: string): letter is ElementType {
	return letter in ELEMENT_BYTES;
}

function scaling(header: Header, number: number, type: ElementType) {
	if (type === 'L' || type === 'X' || type === 'A') return { scale: 1, zero: 0, integerZero: 0n };
	const scale = header.number(`TSCAL${number}`) ?? 1;
	const zero = header.number(`TZERO${number}`) ?? 0;
	const isWhole = scale === 1 && Number.isInteger(zero);
	return { scale, zero, integerZero: isWhole ? (header.bigint(`TZERO${number}`) ?? 0n) : null };
}
