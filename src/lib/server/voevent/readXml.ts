import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { DomainError } from '../domainError';
import { byteOffset, decodeUtf8 } from '../http/utf8';
import { guardXml, XmlFault } from './guardXml';
import type { XmlElement } from './xmlElement';

const LARGEST_BYTES = 1024 * 1024;

const TEXT = '#text';
const CDATA = '#cdata';
const ATTRIBUTES = ':@';
type ParsedNode = Record<string, unknown>;

const parser = new XMLParser({
	preserveOrder: true,
	ignoreAttributes: false,
	attributeNamePrefix: '',
	parseTagValue: false,
	parseAttributeValue: false,
	trimValues: false,
	// References are resolved below: the parser's own table could be added to by a document type.
	processEntities: false,
	cdataPropName: CDATA
});

/**
 * Reads bytes as XML 1.0 in UTF-8, without document types or entities.
 *
 * @throws DomainError `malformedBody` naming byte and line.
 */
export function readXml(body: Buffer): XmlElement {
	if (body.length > LARGEST_BYTES) {
		throw new DomainError(
			'bodyTooLarge',
			`The body is larger than ${LARGEST_BYTES / 1024} KiB: it goes on past byte ${LARGEST_BYTES}.`
		);
	}
	const text = decodeUtf8(body);
	if (text.trim() === '') throw new DomainError('malformedBody', 'The body is empty.');
	try {
		guardXml(text);
		requireWellFormed(text);
	} catch (error) {
		if (!(error instanceof XmlFault)) throw error;
		const byte = byteOffset(body, text, error.index);
		const line = text.slice(0, error.index).split('\n').length;
		throw new DomainError('malformedBody', `${error.message} at byte ${byte}, line ${line}.`);
	}
	return rootOf(text);
}

function requireWellFormed(text: string): void {
	const verdict = XMLValidator.validate(text);
	if (verdict === true) return;
	const { msg, line, col } = verdict.err;
	let start = 0;
	for (let number = 1; number < line; number++) start = text.indexOf('\n', start) + 1;
	const index = Math.min(text.length, start + Math.max(0, (col ?? 1) - 1));
	throw new XmlFault(index, `The XML is not well-formed: ${msg.slice(0, 200).replace(/\.$/, '')}`);
}

function rootOf(text: string): XmlElement {
	let nodes: ParsedNode[];
	try {
		nodes = parser.parse(text) as ParsedNode[];
	} catch (error) {
		// What the validator lets through and the parser does not: nothing is known of the place.
		throw new DomainError(
			'malformedBody',
			`The XML between byte 0 and byte ${Buffer.byteLength(text)} can’t be read: ${(error as Error).message}`
		);
	}
	const root = nodes.map((node) => elementOf(node, '')).find((element) => element !== null);
	if (!root) throw new DomainError('malformedBody', 'There is no element from byte 0 on.');
	return root;
}

/** Null for texts, comments and processing instructions. */
function elementOf(node: ParsedNode, parentPointer: string): XmlElement | null {
	const fullName = Object.keys(node).find((key) => key !== ATTRIBUTES);
	if (fullName === undefined || fullName === TEXT || fullName === CDATA) return null;
	if (fullName.startsWith('?')) return null;
	const name = fullName.slice(fullName.lastIndexOf(':') + 1);
	const pointer = `${parentPointer}/${name}`;
	const inside = node[fullName] as ParsedNode[];
	const attributes = Object.entries((node[ATTRIBUTES] ?? {}) as Record<string, string>);
	return {
		name,
		pointer,
		attributes: new Map(
			attributes.map(([key, value]) => [key, resolve(value.replace(/[\t\n\r]/g, ' ')).trim()])
		),
		children: inside.flatMap((child) => elementOf(child, pointer) ?? []),
		text: inside.map(textOf).join('').trim()
	};
}

function textOf(node: ParsedNode): string {
	if (typeof node[TEXT] === 'string') return resolve(node[TEXT]);
	const section = node[CDATA] as ParsedNode[] | undefined;
	const [inside] = section ?? [];
	return typeof inside?.[TEXT] === 'string' ? inside[TEXT] : '';
}

const PREDEFINED: Record<string, string> = { lt: '<', gt: '>', amp: '&', apos: "'", quot: '"' };

/** Every reference that is left after the guard is one of these. */
function resolve(text: string): string {
	return text.replace(
		/&(?:([a-z]{2,4})|#(\d{1,7})|#x([0-9a-fA-F]{1,6}));/g,
		(_, name, decimal, hex) =>
			typeof name === 'string'
				? (PREDEFINED[name] ?? '')
				: String.fromCodePoint(
						typeof decimal === 'string'
							? Number.parseInt(decimal, 10)
							: Number.parseInt(String(hex), 16)
					)
	);
}
