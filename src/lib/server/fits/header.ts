import { cardValue, writtenInteger, writtenNumber, type CardValue } from './cardValue';
import { FileFault } from './fileFault';

const CARD_BYTES = 80;
export const BLOCK_BYTES = 2880;
/** More cards than any header of a table of 999 columns has. */
const CARDS_MAX = 20_000;

/** The cards of one HDU by keyword, the first of each; `place` names the HDU in faults. */
export class Header {
	constructor(
		readonly place: string,
		private readonly cards: Map<string, CardValue>,
		/** Byte at which the data begin. */
		readonly dataStart: number
	) {}

	has(keyword: string): boolean {
		return this.cards.has(keyword);
	}

	/** A string, without its trailing blanks; null where the card is absent. */
	text(keyword: string): string | null {
		const value = this.cards.get(keyword);
		if (!value) return null;
		if (value.kind === 'text') return value.text;
		throw this.fault(keyword, 'must be a string in quotes');
	}

	number(keyword: string): number | null {
		const written = this.written(keyword);
		return written === null ? null : writtenNumber(written);
	}

	/** A whole number, exactly. */
	bigint(keyword: string): bigint | null {
		const written = this.written(keyword);
		if (written === null) return null;
		const value = writtenInteger(written);
		if (value !== null) return value;
		throw this.fault(keyword, `is ${written}; it must be a whole number`);
	}

	/** A needed whole number in a range. */
	count(keyword: string, least: number, most: number): number {
		const value = this.bigint(keyword);
		if (value === null) throw this.fault(keyword, 'is missing');
		if (value >= BigInt(least) && value <= BigInt(most)) return Number(value);
		throw this.fault(keyword, `is ${value}; it must be from ${least} to ${most}`);
	}

	logical(keyword: string): boolean | null {
		const value = this.cards.get(keyword);
		if (!value) return null;
		if (value.kind === 'logical') return value.value;
		throw this.fault(keyword, 'must be T or F');
	}

	fault(keyword: string, detail: string): FileFault {
		return new FileFault(`${this.place}, ${keyword}`, detail);
	}

	private written(keyword: string): string | null {
		const value = this.cards.get(keyword);
		if (!value) return null;
		if (value.kind === 'number') return value.written;
		throw this.fault(keyword, 'must be a number');
	}
}

/** Reads the header that begins at byte `start`; CONTINUE cards are joined (FITS 4.0, section 4.2.1.2). */
export function readHeader(bytes: Uint8Array, start: number, place: string): Header {
	const cards = new Map<string, CardValue>();
	let last: { keyword: string; value: CardValue } | null = null;
	for (let count = 0, at = start; ; count++, at += CARD_BYTES) {
		if (at + CARD_BYTES > bytes.length) {
			throw new FileFault(place, `has no END: the file ends at byte ${bytes.length} in its header`);
		}
		if (count >= CARDS_MAX) {
			throw new FileFault(place, `has no END within ${CARDS_MAX} cards, up to byte ${at}`);
		}
		const card = cardText(bytes, at, place);
		const keyword = card.slice(0, 8).trimEnd();
		if (keyword === 'END') {
			return new Header(place, cards, start + roundedUp(at + CARD_BYTES - start));
		}
		if (keyword === 'CONTINUE') {
			const more = cardValue(card.slice(8));
			if (last?.value.kind === 'text' && last.value.text.endsWith('&') && more?.kind === 'text') {
				last.value.text = last.value.text.slice(0, -1) + more.text;
			}
			continue;
		}
		last = null;
		if (card.slice(8, 10) !== '= ' || cards.has(keyword)) continue;
		const value = cardValue(card.slice(10));
		if (!value) continue;
		cards.set(keyword, value);
		last = { keyword, value };
	}
}

/** A length filled up to whole blocks. */
export function roundedUp(length: number): number {
	return Math.ceil(length / BLOCK_BYTES) * BLOCK_BYTES;
}

function cardText(bytes: Uint8Array, at: number, place: string): string {
	let text = '';
	for (let i = at; i < at + CARD_BYTES; i++) {
		const byte = bytes[i] ?? 0;
		if (byte < 0x20 || byte > 0x7e) {
			throw new FileFault(place, `has a byte in its header, at ${i}, that is no ASCII text`);
		}
		text += String.fromCharCode(byte);
	}
	return text;
}
