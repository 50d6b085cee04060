import { DomainError } from '../domainError';

const REPLACEMENT = '\ufffd';
const BYTE_ORDER_MARK = Buffer.from([0xef, 0xbb, 0xbf]);

/** Decodes bytes as UTF-8 (a byte-order mark is dropped), or throws `malformedBody` naming the first wrong byte. */
export function decodeUtf8(body: Buffer): string {
	try {
		return new TextDecoder('utf-8', { fatal: true }).decode(body);
	} catch {
		throw new DomainError(
			'malformedBody',
			`The body is not valid UTF-8 from byte ${firstInvalidByte(body)} on.`
		);
	}
}

/** The byte, counted from 0, at which a decoded body's character stands. */
export function byteOffset(body: Buffer, text: string, index: number): number {
	const mark = body.subarray(0, 3).equals(BYTE_ORDER_MARK) ? 3 : 0;
	return mark + Buffer.byteLength(text.slice(0, index));
}

function firstInvalidByte(body: Buffer): number {
	const text = body.toString('utf8');
	let byte = 0;
	let from = 0;
	for (;;) {
		const index = text.indexOf(REPLACEMENT, from);
		if (index < 0) return byte;
		byte += Buffer.byteLength(text.slice(from, index));
		// A replacement character that the sender wrote is no fault.
		if (!body.subarray(byte, byte + 3).equals(Buffer.from(REPLACEMENT))) return byte;
		byte += 3;
		from = index + 1;
	}
}
