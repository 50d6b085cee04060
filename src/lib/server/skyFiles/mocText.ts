import { MOC_ORDER } from '../../sky/healpix/healpix';
import { normalForm, type MocRanges } from '../../sky/moc/moc';
import { FileFault } from '../fits/fileFault';
import { mocCellRuns } from './mocCellRuns';

/** Reads a coverage map in space written as ASCII (IVOA MOC 2.0, section 4.3.2): `1/1 2 4 2/12-14 21`. */
export function readMocAscii(text: string): MocRanges {
	const ranges: MocRanges = [];
	let order: number | null = null;
	// An order may stand apart from its first index, and commas are as good as blanks (MOC 1.1).
	for (const { 0: token, index } of text.matchAll(/[^\s,/]+\/?|\//g)) {
		const place = `byte ${index}, '${token.slice(0, 20)}'`;
		const head = /^(s?)(\d{1,2})\/$/.exec(token);
		if (head) {
			order = Number(head[2]);
			if (order > MOC_ORDER) throw new FileFault(place, `must be an order from 0 to ${MOC_ORDER}`);
			continue;
		}
		const cells = /^(\d{1,19})(?:-(\d{1,19}))?$/.exec(token);
		if (!cells) throw new FileFault(place, 'is neither an order/, an index nor a range a-b');
		if (order === null) throw new FileFault(place, 'stands before any order/');
		ranges.push(rangeOf(order, BigInt(cells[1] ?? ''), BigInt(cells[2] ?? cells[1] ?? ''), place));
	}
	if (order === null) throw new FileFault('byte 0', 'begins no coverage map (order/index …)');
	return normalForm(ranges);
}

/** Reads a coverage map in space written as JSON (IVOA MOC 2.0, appendix): `{"1":[1,2,4],"2":[12]}`. */
export function readMocJson(text: string): MocRanges {
	let value: unknown;
	try {
		value = JSON.parse(text);
	} catch (error) {
		throw new FileFault('JSON', `can't be read: ${(error as Error).message}`);
	}
	if (typeof value !== 'object' || value === null || Array.isArray(value)) {
		throw new FileFault('JSON', 'must be an object of orders with lists of indices');
	}
	const ranges: MocRanges = [];
	for (const [key, list] of Object.entries(value as Record<string, unknown>)) {
		const order = /^\d{1,2}$/.test(key) ? Number(key) : Infinity;
		if (order > MOC_ORDER) {
			throw new FileFault(`/${key.slice(0, 20)}`, `must be an order from 0 to ${MOC_ORDER}`);
		}
		if (!Array.isArray(list)) throw new FileFault(`/${key}`, 'must be a list of indices');
		(list as unknown[]).forEach((index, i) => {
			if (typeof index !== 'number' || !Number.isInteger(index) || index < 0) {
				throw new FileFault(`/${key}/${i}`, 'must be a whole number');
			}
		});
		for (const [i, index] of exactIndices(text, key, list as number[]).entries()) {
			ranges.push(rangeOf(order, index, index, `/${key}/${i}`));
		}
	}
	return normalForm(ranges);
}

/** JSON's numbers are doubles here: past 2^53 the digits are read from the text. */
function exactIndices(text: string, key: string, list: number[]): bigint[] {
	if (list.every((index) => Number.isSafeInteger(index))) return list.map(BigInt);
	const digits = [...text.matchAll(new RegExp(`"${key}"\\s*:\\s*\\[([\\d\\s,]*)\\]`, 'g'))].at(-1);
	const written = (digits?.[1] ?? '').split(',').map((item) => item.trim());
	if (written.length !== list.length) {
		throw new FileFault(`/${key}`, 'must hold its indices as plain digits');
	}
	return written.map(BigInt);
}

function rangeOf(order: number, first: bigint, last: bigint, place: string): [bigint, bigint] {
	const end = 12n << BigInt(2 * order);
	if (last >= end) throw new FileFault(place, `must be less than ${end}, as order ${order} has it`);
	if (first > last) throw new FileFault(place, 'must run from the lower index to the higher');
	const shift = BigInt(2 * (MOC_ORDER - order));
	return [first << shift, (last + 1n) << shift];
}

/** A coverage map in normal form as ASCII, largest cells first, one line for each order. */
export function writeMocAscii(set: MocRanges): string {
	const lines = mocCellRuns(set).map(({ order, runs }) => {
		const words = runs.map(({ first, last }) => (first === last ? `${first}` : `${first}-${last}`));
		return `${order}/${words.join(' ')}`;
	});
	return `${lines.join('\n') || '0/'}\n`;
}

/** A coverage map in normal form as JSON, largest cells first. */
export function writeMocJson(set: MocRanges): string {
	const orders = mocCellRuns(set).map(({ order, runs }) => {
		const indices: bigint[] = [];
		for (const { first, last } of runs) for (let at = first; at <= last; at++) indices.push(at);
		return `"${order}":[${indices.join(',')}]`;
	});
	return `{${orders.join(',')}}\n`;
}
