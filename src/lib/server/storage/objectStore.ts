import { GetObjectCommand, DeleteObjectCommand, S3Client } from '@aws-sdk/client-s3';
import { Upload } from '@aws-sdk/lib-storage';
import type { Readable } from 'node:stream';
import type { Config } from '../config';
import { DomainError } from '../domainError';
import { logger } from '../logger';

/** Where files are kept that came with packets. */
export type ObjectStore = {
	/** Stores a stream whose length need not be known; where the stream fails nothing is stored, and its error is thrown on. */
	put: (key: string, body: Readable) => Promise<void>;
	/** A whole file in a buffer of its own, which may be handed to a thread. */
	get: (key: string) => Promise<ArrayBuffer>;
	remove: (key: string) => Promise<void>;
};

/** Parts of a long upload; the least that S3 takes is 5 MiB. */
const PART_BYTES = 5 * 1024 * 1024;
const PARTS_AT_ONCE = 2;
const CONNECT_MS = 3_000;
const ANSWER_MS = 30_000;

/** Object storage by the S3 API, path-style; null where none is configured. */
export function createObjectStore(storage: Config['storage']): ObjectStore | null {
	if (!storage) return null;
	const Bucket = storage.bucket;
	const client = new S3Client({
		endpoint: storage.url,
		region: storage.region,
		credentials: { accessKeyId: storage.accessKey, secretAccessKey: storage.secretKey },
		forcePathStyle: true,
		// Checksums beyond the signature's are not known to every server that speaks S3.
		requestChecksumCalculation: 'WHEN_REQUIRED',
		responseChecksumValidation: 'WHEN_REQUIRED',
		requestHandler: { connectionTimeout: CONNECT_MS, requestTimeout: ANSWER_MS }
	});
	return {
		put: async (key, body) => {
			let broken: Error | null = null;
			body.once('error', (error) => (broken = error));
			const params = { Bucket, Key: key, Body: body };
			const upload = new Upload({
				client,
				params,
				partSize: PART_BYTES,
				queueSize: PARTS_AT_ONCE,
				leavePartsOnError: false
			});
			try {
				await upload.done();
			} catch (error) {
				// A sender that stops or sends too much is not the storage's fault.
				throw broken ?? unavailable(error);
			}
		},
		get: async (key) => {
			try {
				const { Body, ContentLength } = await client.send(
					new GetObjectCommand({ Bucket, Key: key })
				);
				if (!Body || ContentLength === undefined) throw new Error('an answer without a body');
				return await gathered(Body as Readable, ContentLength);
			} catch (error) {
				throw unavailable(error);
			}
		},
		remove: async (key) => {
			try {
				await client.send(new DeleteObjectCommand({ Bucket, Key: key }));
			} catch (error) {
				throw unavailable(error);
			}
		}
	};
}

/** The store, or a refusal for a person. */
export function requireStore(store: ObjectStore | null): ObjectStore {
	if (store) return store;
	throw new DomainError('unavailable', 'No storage for files is configured (STORAGE_URL).');
}

/** A stream of a known length, without a second copy of it. */
async function gathered(stream: Readable, length: number): Promise<ArrayBuffer> {
	const bytes = new Uint8Array(length);
	let at = 0;
	for await (const piece of stream as AsyncIterable<Uint8Array>) {
		bytes.set(piece, at);
		at += piece.length;
	}
	if (at !== length) throw new Error(`${at} bytes of ${length}`);
	return bytes.buffer;
}

function unavailable(error: unknown): DomainError {
	const { name, message } = error as Error;
	logger.warn({ error: `${name}: ${message}` }, 'object storage');
	return new DomainError('unavailable', 'The storage for files can’t be reached just now.');
}
