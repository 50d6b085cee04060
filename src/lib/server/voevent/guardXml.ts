/** Something that is not taken, at an index into the text. */
export class XmlFault extends Error {
	constructor(
		readonly index: number,
		message: string
	) {
		super(message);
	}
}

const DEEPEST = 40;
const MOST_ELEMENTS = 20_000;
const MOST_ATTRIBUTES_EACH = 64;
const MOST_ATTRIBUTES = 40_000;

/** What is no character of XML 1.0 (production 2): control characters, lone surrogates. */
// eslint-disable-next-line no-control-regex
const NO_CHARACTER = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Surrogate}/u;
/** A text without what XML can't hold. */
export function xmlText(text: string): string {
	return text.replace(new RegExp(NO_CHARACTER, 'gu'), '');
}

const REFERENCE = /&(?:lt|gt|amp|apos|quot|#[0-9]{1,7}|#x[0-9a-fA-F]{1,6});/y;
const ENCODING = /^<\?xml\s[^?]{0,200}?\sencoding\s*=\s*["']([^"'?]{0,60})["']/;
/** The parser refuses them as names of anything. */
const RESERVED = /(?:^|[\s/])(?:__proto__|constructor|prototype)(?=[\s=/]|$)/;

/**
 * Refuses, in one pass and before a parser sees the text, what could make a parser reach out, grow or
 * stall: document types, entities, other encodings, and more nesting or more parts than an alert needs.
 *
 * @throws XmlFault at the first of these.
 */
export function guardXml(text: string): void {
	const wrong = text.search(NO_CHARACTER);
	if (wrong >= 0) throw new XmlFault(wrong, 'There is a character that XML does not allow');
	requireUtf8Declared(text);
	const references = referenceCheck(text);
	let depth = 0;
	let elements = 0;
	let attributes = 0;
	for (let at = 0; at < text.length;) {
		const open = text.indexOf('<', at);
		references.checkTo(open < 0 ? text.length : open);
		if (open < 0) break;
		const plain = endOfPlainMarkup(text, open, depth);
		if (plain !== null) {
			references.skipTo(plain);
			at = plain;
			continue;
		}
		const tag = readTag(text, open);
		references.checkTo(tag.end);
		at = tag.end;
		if (tag.closes) depth--;
		else {
			elements++;
			attributes += tag.attributes;
			if (depth === 0 && elements > 1) throw new XmlFault(open, 'There is a second root element');
			if (!tag.isEmpty) depth++;
		}
		if (depth < 0) throw new XmlFault(open, 'An element is closed that was not opened');
		if (depth > DEEPEST) {
			throw new XmlFault(open, `Elements are nested more than ${DEEPEST} deep`);
		}
		if (elements > MOST_ELEMENTS) {
			throw new XmlFault(open, `There are more than ${MOST_ELEMENTS} elements`);
		}
		if (attributes > MOST_ATTRIBUTES) {
			throw new XmlFault(open, `There are more than ${MOST_ATTRIBUTES} attributes`);
		}
	}
	if (elements === 0) throw new XmlFault(text.length, 'There is no element');
	if (depth > 0) throw new XmlFault(text.length, 'The body ends inside an element');
}

function requireUtf8Declared(text: string): void {
	const encoding = ENCODING.exec(text)?.[1];
	if (encoding !== undefined && !/^(utf-?8|us-ascii)$/i.test(encoding)) {
		throw new XmlFault(0, `The encoding ${encoding} is not read, send UTF-8; declared`);
	}
}

/** The index after a comment, CDATA section or processing instruction at `open`; null for a tag. */
function endOfPlainMarkup(text: string, open: number, depth: number): number | null {
	const after = (close: string, from: number, what: string) => {
		const end = text.indexOf(close, from);
		if (end < 0) throw new XmlFault(text.length, `The body ends inside ${what}`);
		return end + close.length;
	};
	if (text.startsWith('<!--', open)) return after('-->', open + 4, 'a comment');
	if (text.startsWith('<![CDATA[', open)) {
		if (depth === 0) throw new XmlFault(open, 'There is text outside the root element');
		return after(']]>', open + 9, 'a CDATA section');
	}
	if (text.startsWith('<!', open)) {
		throw new XmlFault(open, 'Document types and entities are not taken; there is one');
	}
	if (!text.startsWith('<?', open)) return null;
	if (open > 0 && /^<\?xml[\s?]/i.test(text.slice(open, open + 6))) {
		throw new XmlFault(open, 'An XML declaration may only stand at the start; there is one');
	}
	return after('?>', open + 2, 'a processing instruction');
}

/** The pieces of a tag between its quoted values: the first, the later ones, and those that end it. */
const NAME = String.raw`[^\s<>"'=/&]+`;
const FIRST_PIECE = new RegExp(String.raw`^${NAME}\s+${NAME}\s*=\s*$`);
const NEXT_PIECE = new RegExp(String.raw`^\s+${NAME}\s*=\s*$`);
const WHOLE_TAG = new RegExp(String.raw`^(?:/${NAME}\s*|${NAME}\s*/?)$`);
const LAST_PIECE = /^\s*\/?$/;

type Tag = { end: number; closes: boolean; isEmpty: boolean; attributes: number };

function readTag(text: string, open: number): Tag {
	let attributes = 0;
	let from = open + 1;
	for (let at = from; at < text.length; at++) {
		const character = text[at]!;
		if (character === '<') throw new XmlFault(at, 'A tag begins inside another');
		if (character !== '>' && character !== '"' && character !== "'") continue;
		const piece = text.slice(from, at);
		const ends = character === '>';
		const [last, valued] = attributes === 0 ? [WHOLE_TAG, FIRST_PIECE] : [LAST_PIECE, NEXT_PIECE];
		if (!(ends ? last : valued).test(piece)) throw new XmlFault(from, 'A tag is not well-formed');
		requireFreeName(piece, from);
		if (ends) {
			const closes = text[open + 1] === '/';
			return { end: at + 1, closes, isEmpty: text[at - 1] === '/', attributes };
		}
		const close = text.indexOf(character, at + 1);
		if (close < 0) throw new XmlFault(text.length, 'The body ends inside an attribute');
		const less = text.slice(at, close).indexOf('<');
		if (less >= 0) throw new XmlFault(at + less, 'An attribute contains <');
		if (++attributes > MOST_ATTRIBUTES_EACH) {
			throw new XmlFault(open, `An element has more than ${MOST_ATTRIBUTES_EACH} attributes`);
		}
		at = close;
		from = close + 1;
	}
	throw new XmlFault(text.length, 'The body ends inside a tag');
}

function requireFreeName(names: string, from: number): void {
	const reserved = names.search(RESERVED);
	if (reserved >= 0) throw new XmlFault(from + reserved, 'A reserved name is used');
}

/** Walks from one `&` to the next, each looked for once: a search from every tag would take quadratic time. */
function referenceCheck(text: string) {
	let at = text.indexOf('&');
	const after = (index: number) => text.indexOf('&', index);
	return {
		skipTo(end: number) {
			if (at >= 0 && at < end) at = after(end);
		},
		checkTo(end: number) {
			for (; at >= 0 && at < end; at = after(at + 1)) {
				REFERENCE.lastIndex = at;
				const reference = REFERENCE.exec(text)?.[0];
				if (reference !== undefined && isCharacter(reference)) continue;
				throw new XmlFault(
					at,
					'Only the five predefined entities and numeric references to characters are taken; there is another'
				);
			}
		}
	};
}

function isCharacter(reference: string): boolean {
	if (reference[1] !== '#') return true;
	const code =
		reference[2] === 'x'
			? Number.parseInt(reference.slice(3), 16)
			: Number.parseInt(reference.slice(2), 10);
	return code <= 0x10ffff && !NO_CHARACTER.test(String.fromCodePoint(code));
}
