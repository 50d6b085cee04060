/** A header card's value: a string, a logical, or a number as it is written, so that 64-bit ones stay exact. */
export type CardValue =
	| { kind: 'text'; text: string }
	| { kind: 'logical'; value: boolean }
	| { kind: 'number'; written: string };

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)([EeDd][+-]?\d+)?$/;

/** Reads columns 11 to 80 of a card (FITS 4.0, section 4.2); null for what is no such value. */
export function cardValue(field: string): CardValue | null {
	const trimmed = field.trimStart();
	if (trimmed.startsWith("'")) {
		const match = /^'((?:[^']|'')*)'/.exec(trimmed);
		if (!match) return null;
		// Trailing blanks do not count (section 4.2.1).
		return { kind: 'text', text: (match[1] ?? '').replaceAll("''", "'").trimEnd() };
	}
	const word = (trimmed.split('/')[0] ?? '').trim();
	if (word === 'T' || word === 'F') return { kind: 'logical', value: word === 'T' };
	return NUMBER.test(word) ? { kind: 'number', written: word } : null;
}

/** The number that is written, exponents by D included. */
export function writtenNumber(written: string): number {
	return Number(written.replace(/[Dd]/, 'E'));
}

/** The whole number that is written, exactly; null where it is none. */
export function writtenInteger(written: string): bigint | null {
	const plain = /^([+-]?\d+)(?:\.0*)?$/.exec(written);
	if (plain) return BigInt((plain[1] ?? '0').replace(/^\+/, ''));
	const value = writtenNumber(written);
	return Number.isInteger(value) ? BigInt(value) : null;
}
