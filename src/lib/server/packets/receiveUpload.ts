import { randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { ReadableStream } from 'node:stream/web';
import { Busboy } from '@fastify/busboy';
import type { App } from '../app';
import { DomainError } from '../domainError';
import { requireStore } from '../storage/objectStore';
import { Meter } from './meter';

/** Largest file that is taken. */
export const FILE_BYTES_MAX = 64 * 1024 * 1024;
const FIELD_BYTES_MAX = 256 * 1024;
const FIELDS_MAX = 30;
const LONGEST_NAME = 200;

export type StoredFile = { key: string; name: string; bytes: number; sha256: string };

/** A multipart/form-data body: its fields by name, and its one file, which is in object storage by now. */
export type Upload = { fields: Map<string, string>; file: StoredFile | null };

/**
 * Reads a multipart/form-data body as it arrives: the part `file` goes straight into object storage while its
 * hash is taken, so that no more than a few pieces of it are in memory.
 *
 * @throws DomainError `bodyTooLarge` or `malformedBody`; nothing is left in storage then.
 */
export async function receiveUpload(app: App, request: Request): Promise<Upload> {
	const store = requireStore(app.files);
	const busboy = parserOf(request);
	const fields = new Map<string, string>();
	const meter = new Meter();
	let storing: Promise<StoredFile> | null = null;
	let refusal: DomainError | null = null;
	const refuse = (error: DomainError) => (refusal ??= error);

	const keep = async (stream: Readable, name: string): Promise<StoredFile> => {
		const key = `packets/${app.now().toISOString().slice(0, 10)}/${randomUUID()}`;
		stream.on('limit', () => meter.destroy(refuse(tooLargeFile())));
		stream.on('error', (error: Error) => meter.destroy(error));
		stream.pipe(meter);
		try {
			await store.put(key, meter);
		} catch (error) {
			// The rest of the body is read and dropped, so that the sender reads the answer.
			stream.unpipe(meter);
			stream.resume();
			throw error;
		}
		return { key, name, bytes: meter.bytes, sha256: meter.sha256() };
	};

	busboy.on('field', (name, value, _nameCut, valueCut) => {
		if (valueCut) refuse(tooLongField(name));
		else fields.set(name, value);
	});
	busboy.on('file', (_name, stream, fileName) => {
		storing = keep(stream, String(fileName ?? '').slice(0, LONGEST_NAME));
		// Awaited below; until then a failure is not an unhandled one.
		storing.catch(() => undefined);
	});
	for (const limit of ['filesLimit', 'fieldsLimit'] as const) {
		busboy.on(limit, () => refuse(malformed('It has too many fields, or more than one file.')));
	}
	try {
		if (!request.body) throw malformed('The body is empty.');
		await pipeline(Readable.fromWeb(request.body as ReadableStream<Uint8Array>), busboy);
	} catch (error) {
		const reason = refuse(brokenBody(error));
		meter.destroy(reason);
	}
	const [outcome] = await Promise.allSettled([storing as Promise<StoredFile> | null]);
	const file = outcome.status === 'fulfilled' ? outcome.value : null;
	const error: unknown = refusal ?? (outcome.status === 'rejected' ? outcome.reason : null);
	if (!error) return { fields, file };
	if (file) await store.remove(file.key);
	throw error;
}

function parserOf(request: Request): Busboy {
	const type = request.headers.get('content-type') ?? '';
	try {
		return new Busboy({
			headers: { 'content-type': type },
			// Some senders give every part a file's name.
			isPartAFile: (name) => name === 'file',
			limits: {
				files: 1,
				fields: FIELDS_MAX,
				fieldSize: FIELD_BYTES_MAX,
				fileSize: FILE_BYTES_MAX,
				headerPairs: 50
			}
		});
	} catch (error) {
		throw malformed(`The form can’t be read: ${(error as Error).message}.`);
	}
}

function brokenBody(error: unknown): DomainError {
	if (error instanceof DomainError) return error;
	// The web server's own limit ends a body whose length was not stated.
	if ((error as { status?: unknown }).status === 413) return tooLargeFile();
	return malformed(`The form can’t be read: ${(error as Error).message}.`);
}

function malformed(sentence: string): DomainError {
	return new DomainError('malformedBody', sentence);
}

function tooLargeFile(): DomainError {
	return new DomainError(
		'bodyTooLarge',
		`The file is larger than ${FILE_BYTES_MAX / 2 ** 20} MiB.`
	);
}

function tooLongField(name: string): DomainError {
	const limit = `${FIELD_BYTES_MAX / 1024} KiB`;
	return new DomainError('bodyTooLarge', `The field ${name} is larger than ${limit}.`);
}
