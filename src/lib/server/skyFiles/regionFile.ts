import { cellAreaSr } from '../../sky/healpix/healpix';
import { jointCells, type Search } from '../../sky/catch/jointCells';
import type { Shape } from '../../sky/regions/shape';
import { writeFits, type Card } from '../fits/writeFits';

/** What a joint region is made of, and the names that its file carries. */
export type RegionFileInput = {
	shapes: Shape[];
	search: Search | null;
	designation: string;
	version: number;
	/** ISO 8601, UTC. */
	t0: string;
	computedAt: string;
};

/** Programs that keep pixels in 32 bits end here. */
const DEEP_ORDER = 13;

/** The joint region as a multi-order HEALPix map of the whole sky: UNIQ and PROBDENSITY, ICRS, ascending. */
export function regionFile({ shapes, search, ...names }: RegionFileInput): Uint8Array {
	const { cells, isApart } = jointCells(shapes, search);
	const { finest } = cells;
	const rows: { uniq: number; density: number }[] = [];
	let reached = 0;
	let held = 0;
	for (let i = 0; i < cells.start.length; i++) {
		const order = cells.order[i] ?? 0;
		const start = cells.start[i] ?? 0;
		const side = 4 ** (finest - order);
		fillGap(rows, finest, reached, start);
		rows.push({ uniq: 4 * 4 ** order + start / side, density: cells.density[i] ?? 0 });
		held += (cells.density[i] ?? 0) * cellAreaSr(order);
		reached = start + side;
	}
	fillGap(rows, finest, reached, 12 * 4 ** finest);
	rows.sort((a, b) => a.uniq - b.uniq);
	return writeFits(
		[
			{ name: 'UNIQ', form: 'K', values: rows.map(({ uniq }) => uniq) },
			{
				name: 'PROBDENSITY',
				form: 'D',
				unit: 'sr-1',
				values: rows.map(({ density }) => density / held)
			}
		],
		cardsOf(finest, names),
		[
			'Joint region of all alerts that belong to the transient, and of what was searched in vain.',
			...(isApart
				? ['The alerts contradict each other: this is their mixture, each counted once.']
				: []),
			...(finest > DEEP_ORDER ? ['Cells finer than order 13 are not read by every program.'] : [])
		]
	);
}

/** Cells without probability, the largest that fit: programs expect the whole sky. */
function fillGap(
	rows: { uniq: number; density: number }[],
	finest: number,
	from: number,
	end: number
): void {
	for (let at = from; at < end;) {
		let order = finest;
		let side = 1;
		while (order > 0 && at % (4 * side) === 0 && at + 4 * side <= end) {
			order -= 1;
			side *= 4;
		}
		rows.push({ uniq: 4 * 4 ** order + at / side, density: 0 });
		at += side;
	}
}

function cardsOf(finest: number, names: Omit<RegionFileInput, 'shapes' | 'search'>): Card[] {
	return [
		['EXTNAME', 'REGION'],
		['PIXTYPE', 'HEALPIX'],
		['ORDERING', 'NUNIQ'],
		['COORDSYS', 'C', 'ICRS'],
		['INDXSCHM', 'EXPLICIT'],
		['MOCORDER', finest, 'finest order of the cells'],
		['OBJECT', names.designation],
		['REGVERS', names.version, 'version of the region'],
		['DATE-OBS', fitsTime(names.t0), 'T0, UTC'],
		['DATE', fitsTime(names.computedAt), 'when it was computed, UTC']
	];
}

/** FITS times carry no zone (FITS 4.0, section 9.1.1). */
function fitsTime(iso: string): string {
	return iso.replace(/Z$/, '');
}
