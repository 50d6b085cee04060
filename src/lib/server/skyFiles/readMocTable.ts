import { MOC_END, normalForm, type MocRanges } from '../../sky/moc/moc';
import { MOC_ORDER } from '../../sky/healpix/healpix';
import { columnNamed, elementPlace, integersOf, type BinaryTable } from '../fits/binaryTable';
import { FileFault } from '../fits/fileFault';

/** Numbers that a coverage map may have: a million ranges are far more than any region needs. */
const NUMBERS_MAX = 2_000_000;

/** Whether a table holds a coverage map (IVOA MOC 1.1 and 2.0): ranges, or UNIQ numbers and nothing else. */
export function isMocTable({ header, columns }: BinaryTable): boolean {
	const ordering = header.has('ORDERING') ? (header.text('ORDERING') ?? '') : '';
	if (ordering.startsWith('RANGE')) return true;
	return (ordering === 'NUNIQ' || ordering === 'UNIQ') && columns.length === 1;
}

/** Reads a coverage map in space, as NUNIQ or RANGE. */
export function readMocTable(table: BinaryTable): MocRanges {
	const { header } = table;
	const dimension = header.has('MOCDIM') ? (header.text('MOCDIM') ?? '') : 'SPACE';
	if (dimension.toUpperCase() !== 'SPACE') {
		throw header.fault('MOCDIM', `is '${dimension}'; only coverage in SPACE is read`);
	}
	const frame = header.has('COORDSYS') ? (header.text('COORDSYS') ?? '') : 'C';
	if (frame !== 'C') {
		throw header.fault('COORDSYS', `is '${frame}'; coverage maps are in C (ICRS)`);
	}
	const numbers = table.rowCount * soleColumn(table, 'UNIQ').repeat;
	if (numbers > NUMBERS_MAX) {
		throw header.fault('NAXIS2', `makes ${numbers} numbers; at most ${NUMBERS_MAX} are read`);
	}
	const ordering = header.text('ORDERING') ?? '';
	if (ordering === 'NUNIQ' || ordering === 'UNIQ') return normalForm(fromUniq(table));
	if (ordering === 'RANGE') return normalForm(fromRanges(table));
	throw header.fault('ORDERING', `is '${ordering}'; it must be NUNIQ or RANGE`);
}

function soleColumn(table: BinaryTable, name: string) {
	const column = columnNamed(table, name) ?? table.columns[0];
	if (column) return column;
	throw table.header.fault('TFIELDS', 'is 0; a coverage map has one column');
}

function fromUniq(table: BinaryTable): MocRanges {
	const column = soleColumn(table, 'UNIQ');
	return integersOf(table, column).map((uniq, i): [bigint, bigint] => {
		const order = uniq >= 4n ? (uniq.toString(2).length - 3) >> 1 : -1;
		const pixel = uniq - (4n << BigInt(2 * Math.max(0, order)));
		if (order < 0 || order > MOC_ORDER || pixel >= 12n << BigInt(2 * order)) {
			const place = elementPlace(table, column, i);
			throw new FileFault(place, `is ${uniq}; it must be a UNIQ number of order 0 to ${MOC_ORDER}`);
		}
		const shift = BigInt(2 * (MOC_ORDER - order));
		return [pixel << shift, (pixel + 1n) << shift];
	});
}

function fromRanges(table: BinaryTable): MocRanges {
	const column = soleColumn(table, 'RANGE');
	const bounds = integersOf(table, column);
	if (bounds.length % 2 !== 0) {
		throw table.header.fault('NAXIS2', 'is odd; a range takes two numbers, start and end');
	}
	const ranges: MocRanges = [];
	for (let i = 0; i < bounds.length; i += 2) {
		const start = bounds[i] ?? 0n;
		const end = bounds[i + 1] ?? 0n;
		if (!(start >= 0n && start < end && end <= MOC_END)) {
			const place = elementPlace(table, column, i);
			throw new FileFault(place, `is ${start} to ${end}; it must lie in 0 to ${MOC_END}, in order`);
		}
		ranges.push([start, end]);
	}
	return ranges;
}
