import { createHash } from 'node:crypto';
import { Transform, type TransformCallback } from 'node:stream';

/** Passes a stream on while counting its bytes and taking its SHA-256. */
export class Meter extends Transform {
	bytes = 0;
	private readonly hash = createHash('sha256');

	constructor() {
		super();
		// It may break before anybody listens; who reads it is told all the same.
		this.on('error', () => undefined);
	}

	override _transform(piece: Buffer, _encoding: BufferEncoding, done: TransformCallback): void {
		this.bytes += piece.length;
		this.hash.update(piece);
		done(null, piece);
	}

	/** In hexadecimal; once, at the end. */
	sha256(): string {
		return this.hash.digest('hex');
	}
}
