import type { Readable } from 'node:stream';
import { DomainError } from '../../src/lib/server/domainError';
import type { ObjectStore } from '../../src/lib/server/storage/objectStore';

/** Object storage for database tests: what is stored is in `held`. */
export function memoryStore(): ObjectStore & { held: Map<string, Buffer> } {
	const held = new Map<string, Buffer>();
	return {
		held,
		put: async (key, body: Readable) => {
			const pieces: Buffer[] = [];
			for await (const piece of body as AsyncIterable<Buffer>) pieces.push(piece);
			held.set(key, Buffer.concat(pieces));
		},
		get: (key) => {
			const bytes = held.get(key);
			if (!bytes) return Promise.reject(new DomainError('unavailable', 'There is no such file.'));
			return Promise.resolve(new Uint8Array(bytes).buffer);
		},
		remove: (key) => {
			held.delete(key);
			return Promise.resolve();
		}
	};
}
