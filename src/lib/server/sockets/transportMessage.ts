import { XMLBuilder, XMLParser } from 'fast-xml-parser';

/**
 * The documents of the VOEvent Transport Protocol 2.0 besides VOEvents: a `Transport` element with a role and,
 * in this order, Origin, Response, TimeStamp and Meta/Result. Names, roles and the namespace are from memory
 * of the Recommendation and its schema, whose text was not at hand; documents are read whatever their namespace,
 * as two spellings of it are in use.
 */
export type TransportMessage = {
	role: string;
	/** In an answer: the party, or the VOEvent, that is answered. */
	origin: string;
	/** In an answer: who answers. */
	response: string;
	timeStamp: string;
	result: string;
};

/** What came over a socket. */
export type SocketMessage =
	| { kind: 'transport'; message: TransportMessage }
	/** Anything else is a packet, even one that can't be read; then its IVORN may be unknown. */
	| { kind: 'packet'; ivorn: string | null };

export type Answer = {
	role: 'iamalive' | 'authenticate' | 'ack' | 'nak';
	origin: string;
	response: string;
	at: Date;
	result?: string;
};

const NAMESPACE = 'http://www.telescope-networks.org/xml/Transport/v1.1';
const ATTRIBUTE = '@_';

const parser = new XMLParser({
	ignoreAttributes: false,
	attributeNamePrefix: ATTRIBUTE,
	removeNSPrefix: true,
	parseTagValue: false,
	ignoreDeclaration: true,
	ignorePiTags: true
});

const builder = new XMLBuilder({
	ignoreAttributes: false,
	attributeNamePrefix: ATTRIBUTE,
	suppressEmptyNode: false
});

/** Tells the protocol's own documents from packets; a packet is not looked into further than its IVORN. */
export function readSocketMessage(body: Buffer): SocketMessage {
	const root = rootOf(body.toString('utf8'));
	if (!root) return { kind: 'packet', ivorn: null };
	if (root.name !== 'Transport') {
		const ivorn = textOf(root.content[`${ATTRIBUTE}ivorn`]);
		return { kind: 'packet', ivorn: ivorn || null };
	}
	const { Origin, Response, TimeStamp, Meta } = root.content;
	return {
		kind: 'transport',
		message: {
			role: textOf(root.content[`${ATTRIBUTE}role`]),
			origin: textOf(Origin),
			response: textOf(Response),
			timeStamp: textOf(TimeStamp),
			result: isElement(Meta) ? textOf(Meta.Result) : ''
		}
	};
}

/** Writes an answer, or what a broker sends by itself when `response` is empty. */
export function writeTransport({ role, origin, response, at, result }: Answer): Buffer {
	const xml: unknown = builder.build({
		'?xml': { '@_version': '1.0', '@_encoding': 'UTF-8' },
		'trn:Transport': {
			'@_role': role,
			'@_version': '1.0',
			'@_xmlns:trn': NAMESPACE,
			Origin: xmlText(origin),
			...(response ? { Response: xmlText(response) } : {}),
			TimeStamp: at.toISOString(),
			...(result ? { Meta: { Result: xmlText(result) } } : {})
		}
	});
	return Buffer.from(String(xml), 'utf8');
}

type Element = Record<string, unknown>;

function rootOf(xml: string): { name: string; content: Element } | null {
	let parsed: unknown;
	try {
		parsed = parser.parse(xml, true);
	} catch {
		return null;
	}
	if (!isElement(parsed)) return null;
	const [name, ...others] = Object.keys(parsed).filter((key) => key !== '#text');
	if (name === undefined || others.length > 0) return null;
	const content = parsed[name];
	// A second root of the same name makes a list of it.
	if (Array.isArray(content)) return null;
	return { name, content: isElement(content) ? content : {} };
}

function isElement(value: unknown): value is Element {
	return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** The text of an attribute or element; nothing where an element stands twice. */
function textOf(value: unknown): string {
	if (typeof value === 'string') return value.trim();
	return isElement(value) && typeof value['#text'] === 'string' ? value['#text'].trim() : '';
}

/** XML 1.0 has no place for most control characters, not even as entities. */
function xmlText(text: string): string {
	// eslint-disable-next-line no-control-regex
	return text.replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, '\ufffd');
}
