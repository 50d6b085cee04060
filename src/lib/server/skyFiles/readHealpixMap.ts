import { ring2nest } from '@hscmap/healpix';
import { cellAreaSr } from '../../sky/healpix/healpix';
import { MapFault } from '../../sky/regions/mapFault';
import { mapShapeFrom, type MapFrame, type MapSource } from '../../sky/regions/mapShapeFrom';
import { FLAT_ORDER_MAX, type MapShape } from '../../sky/regions/shape';
import { columnNamed, elementPlace, numbersOf, type BinaryTable } from '../fits/binaryTable';
import { FileFault } from '../fits/fileFault';
import type { TableColumn } from '../fits/tableColumn';

/** How a coordinate system may be written; others are refused by name. */
const FRAMES: Record<string, MapFrame> = {
	C: 'icrs',
	ICRS: 'icrs',
	G: 'galactic',
	GALACTIC: 'galactic'
};
/** Greatest order of a map that lists its pixels: the library packs indices into 32-bit integers. */
const LISTED_ORDER_MAX = 13;
/** Rows of a map that lists its cells: 128 MiB of them, of which a thread needs several times as much. */
const ROWS_MAX = 8_000_000;

type Source = { map: MapSource; values: TableColumn; cells: TableColumn | null };

/**
 * Reads a HEALPix map of probabilities from a binary table: every pixel of one order, a list of pixels
 * (INDXSCHM EXPLICIT), or cells of several orders (UNIQ).
 *
 * @throws FileFault naming keyword or row.
 */
export function readHealpixMap(table: BinaryTable): MapShape {
	const source = sourceOf(table);
	try {
		return mapShapeFrom(source.map);
	} catch (error) {
		if (error instanceof MapFault) throw placed(table, source, error);
		throw error;
	}
}

function sourceOf(table: BinaryTable): Source {
	const ordering = (table.header.text('ORDERING') ?? '').toUpperCase();
	if (ordering === 'NUNIQ' || ordering === 'UNIQ') return multiOrder(table);
	if (ordering !== 'NESTED' && ordering !== 'NEST' && ordering !== 'RING') {
		throw table.header.fault('ORDERING', `is '${ordering}'; it must be NESTED, RING or NUNIQ`);
	}
	const nside = table.header.count('NSIDE', 1, 2 ** LISTED_ORDER_MAX);
	if (!Number.isInteger(Math.log2(nside))) {
		throw table.header.fault('NSIDE', `is ${nside}; it must be a power of 2`);
	}
	const isRing = ordering === 'RING';
	const scheme = (table.header.text('INDXSCHM') ?? 'IMPLICIT').toUpperCase();
	if (scheme === 'EXPLICIT') return listed(table, nside, isRing);
	if (scheme !== 'IMPLICIT') {
		throw table.header.fault('INDXSCHM', `is '${scheme}'; it must be IMPLICIT or EXPLICIT`);
	}
	if (nside > 2 ** FLAT_ORDER_MAX) {
		throw table.header.fault('NSIDE', `is ${nside}; a whole map may have ${2 ** FLAT_ORDER_MAX}`);
	}
	const values = valueColumn(table);
	const has = table.rowCount * values.repeat;
	if (has !== 12 * nside * nside) {
		throw table.header.fault(
			'NSIDE',
			`is ${nside}, of ${12 * nside * nside} pixels; there are ${has}`
		);
	}
	return {
		map: {
			nside,
			ordering: isRing ? 'ring' : 'nested',
			frame: frameOf(table),
			density: numbersOf(table, values)
		},
		values,
		cells: null
	};
}

function listed(table: BinaryTable, nside: number, isRing: boolean): Source {
	const cells = columnNamed(table, 'PIXEL', 'PIX', 'IPIX', 'INDEX') ?? table.columns[0];
	if (!cells) throw table.header.fault('TFIELDS', 'is 0; a map has a column PIXEL');
	const values = valueColumn(table);
	requireSingle(table, cells);
	requireSingle(table, values);
	const uniq = Float64Array.from(numbersOf(table, cells));
	const end = 12 * nside * nside;
	for (let i = 0; i < uniq.length; i++) {
		const pixel = uniq[i] ?? NaN;
		if (!(Number.isInteger(pixel) && pixel >= 0 && pixel < end)) {
			const place = elementPlace(table, cells, i);
			throw new FileFault(place, `is ${pixel}; nside ${nside} has pixels 0 to ${end - 1}`);
		}
		uniq[i] = 4 * nside * nside + (isRing ? ring2nest(nside, pixel) : pixel);
	}
	const map = { uniq, density: numbersOf(table, values), frame: frameOf(table) };
	return { map, values, cells };
}

function multiOrder(table: BinaryTable): Source {
	const cells = columnNamed(table, 'UNIQ');
	if (!cells) throw table.header.fault('ORDERING', 'is NUNIQ, but there is no column UNIQ');
	const values = valueColumn(table);
	requireSingle(table, cells);
	requireSingle(table, values);
	const uniq = numbersOf(table, cells);
	let density = numbersOf(table, values);
	// PROB in a map of several orders is what a cell holds, not how dense it is.
	if (values === columnNamed(table, 'PROB', 'PROBABILITY')) {
		density = Float64Array.from(density, (held, i) => held / areaOf(uniq[i] ?? 0));
	}
	return { map: { uniq, density, frame: frameOf(table) }, values, cells };
}

/** Area of a UNIQ number's cell, or of any cell where it is none: that is refused with the map. */
function areaOf(uniq: number): number {
	return cellAreaSr(Math.max(0, Math.floor(Math.log2(uniq / 4) / 2)) || 0);
}

function valueColumn(table: BinaryTable): TableColumn {
	const found =
		columnNamed(table, 'PROBDENSITY', 'PROB', 'PROBABILITY') ??
		table.columns.find(({ type }) => type === 'E' || type === 'D');
	if (found) return found;
	throw table.header.fault('TFIELDS', 'has no column PROB, PROBDENSITY or other of reals');
}

function requireSingle(table: BinaryTable, { number, repeat, name }: TableColumn): void {
	if (table.rowCount > ROWS_MAX) {
		throw table.header.fault('NAXIS2', `is ${table.rowCount}; at most ${ROWS_MAX} cells are read`);
	}
	if (repeat === 1) return;
	throw table.header.fault(`TFORM${number}`, `has ${repeat} elements; ${name} must have one a row`);
}

function frameOf(table: BinaryTable): MapFrame {
	const written = table.header.text('COORDSYS');
	if (written === null) {
		throw table.header.fault('COORDSYS', 'is missing; it must be C (ICRS) or G (galactic)');
	}
	const frame = FRAMES[written.trim().toUpperCase()];
	if (frame) return frame;
	throw table.header.fault('COORDSYS', `is '${written}'; only C (ICRS) and G (galactic) are read`);
}

function placed(table: BinaryTable, { values, cells }: Source, fault: MapFault): FileFault {
	const column = fault.field === 'uniq' && cells ? cells : values;
	if (fault.entry === null) {
		return new FileFault(`${table.header.place}, column ${column.name}`, fault.detail);
	}
	return new FileFault(elementPlace(table, column, fault.entry), fault.detail);
}
