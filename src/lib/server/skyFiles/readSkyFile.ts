import type { MapShape } from '../../sky/regions/shape';
import type { BinaryTable } from '../fits/binaryTable';
import { FileFault } from '../fits/fileFault';
import { inflated, isGzip } from '../fits/inflated';
import { isFits, readFits } from '../fits/readFits';
import { mocShape } from './mocShape';
import { readMocAscii, readMocJson } from './mocText';
import { isMocTable, readMocTable } from './readMocTable';
import { readHealpixMap } from './readHealpixMap';

/** Longest coverage map in text. */
const TEXT_BYTES_MAX = 4 * 1024 * 1024;

/**
 * Reads a file with a region: a HEALPix probability map in FITS, or a coverage map in FITS, JSON or ASCII; any of
 * them may be compressed with gzip. What it is shows in its first bytes, not in its name.
 *
 * @throws FileFault naming HDU, keyword, row or byte.
 */
export function readSkyFile(bytes: Uint8Array): MapShape {
	const content = isGzip(bytes) ? inflated(bytes) : bytes;
	if (content.length === 0) throw new FileFault('byte 0', 'is missing: the file is empty');
	if (isFits(content)) return fromTables(readFits(content).tables);
	if (content.length > TEXT_BYTES_MAX) {
		throw new FileFault('byte 0', 'is not the start of a FITS file, and it is too long for text');
	}
	const text = textOf(content);
	return mocShape(/^\s*\{/.test(text) ? readMocJson(text) : readMocAscii(text));
}

/** The first table that is a region; others, such as lists of sources, may stand before it. */
function fromTables(tables: BinaryTable[]): MapShape {
	for (const table of tables) {
		if (isMocTable(table)) return mocShape(readMocTable(table));
		if (table.header.has('ORDERING')) return readHealpixMap(table);
	}
	throw new FileFault(
		tables[0]?.header.place ?? 'HDU 1',
		'is no HEALPix map and no coverage map: no table has the keyword ORDERING'
	);
}

function textOf(content: Uint8Array): string {
	const odd = content.findIndex(
		(byte) => byte > 0x7e || (byte < 0x20 && byte !== 9 && byte !== 10 && byte !== 13)
	);
	if (odd < 0) return new TextDecoder('ascii').decode(content);
	throw new FileFault(`byte ${odd}`, 'is no text, and the file is no FITS file (SIMPLE =) either');
}
