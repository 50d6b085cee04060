/**
 * Framing of the VOEvent Transport Protocol 2.0 (IVOA Recommendation of 20 March 2017): each message is
 * preceded by its length in bytes, four bytes, big-endian.
 */

/** Far above any VOEvent; what claims to be longer is not read. */
export const LONGEST_MESSAGE_BYTES = 1024 * 1024;

const HEADER_BYTES = 4;

/** A message longer than may be read: where the next one begins is not worth waiting for. */
export class FrameError extends Error {
	override name = 'FrameError';
}

/** A message with its length before it. */
export function frameOf(body: Buffer): Buffer {
	const header = Buffer.alloc(HEADER_BYTES);
	header.writeUInt32BE(body.length);
	return Buffer.concat([header, body]);
}

/** Cuts what comes over a wire into messages; holds one unfinished message at most. */
export class FrameReader {
	#header = Buffer.alloc(HEADER_BYTES);
	#headerFilled = 0;
	#body: Buffer | null = null;
	#bodyFilled = 0;

	constructor(private readonly longestBytes = LONGEST_MESSAGE_BYTES) {}

	/**
	 * The messages that a chunk completes, one after the other, of length nought included; to be read to the
	 * end before the next chunk.
	 *
	 * @throws FrameError at a length over the limit; nothing can be read after it.
	 */
	*read(chunk: Buffer): Generator<Buffer, void, void> {
		let at = 0;
		while (at < chunk.length || (this.#body && this.#bodyFilled === this.#body.length)) {
			if (!this.#body) {
				const taken = chunk.copy(this.#header, this.#headerFilled, at);
				this.#headerFilled += taken;
				at += taken;
				if (this.#headerFilled < HEADER_BYTES) return;
				this.#body = this.#begin(this.#header.readUInt32BE());
			}
			const taken = chunk.copy(this.#body, this.#bodyFilled, at);
			this.#bodyFilled += taken;
			at += taken;
			if (this.#bodyFilled < this.#body.length) return;
			const message = this.#body;
			this.#body = null;
			this.#headerFilled = 0;
			yield message;
		}
	}

	#begin(lengthBytes: number): Buffer {
		if (lengthBytes > this.longestBytes) {
			throw new FrameError(
				`A message of ${lengthBytes} bytes was announced; at most ${this.longestBytes} are read`
			);
		}
		this.#bodyFilled = 0;
		return Buffer.alloc(lengthBytes);
	}
}
