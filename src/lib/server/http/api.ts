import { json, type RequestEvent } from '@sveltejs/kit';
import type { z } from 'zod';
import type { Permission } from '../../domain/permissions';
import { requirePermission } from '../actor';
import { DomainError } from '../domainError';
import { jsonFaultIndex } from './jsonFault';
import { parseInput, problemResponse } from './problem';
import { byteOffset, decodeUtf8 } from './utf8';

const JSON_LIMIT_BYTES = 256 * 1024;

/** Runs an API handler: its return value is the JSON answer, a DomainError becomes a problem document. */
export async function answer(
	body: () => Promise<Response | object>,
	init: ResponseInit = {}
): Promise<Response> {
	try {
		const result = await body();
		return result instanceof Response ? result : json(result, init);
	} catch (error) {
		if (error instanceof DomainError) return problemResponse(error);
		throw error;
	}
}

/** Reads the body, at most `limitBytes`; stops reading as soon as it is too long. */
export async function readBody(request: Request, limitBytes: number): Promise<Buffer> {
	const tooLarge = new DomainError(
		'bodyTooLarge',
		`The body is larger than ${limitBytes / 1024} KiB.`
	);
	const declared = Number(request.headers.get('content-length') ?? 0);
	const pieces: Uint8Array[] = [];
	let size = 0;
	if (request.body) {
		for await (const piece of request.body as unknown as AsyncIterable<Uint8Array>) {
			size += piece.byteLength;
			// A short overrun is drained, so that the sender reads the answer instead of a reset.
			if (size <= limitBytes) pieces.push(piece);
			else if (size > limitBytes * 8) throw tooLarge;
		}
	}
	if (size > limitBytes || declared > limitBytes) throw tooLarge;
	return Buffer.concat(pieces);
}

/** Media type of a request without its parameters, lower case. */
export function mediaTypeOf(request: Request): string {
	return (request.headers.get('content-type') ?? '').split(';')[0]!.trim().toLowerCase();
}

/** Parses bytes as JSON in valid UTF-8 (a byte-order mark is accepted), or throws `malformedBody` naming the byte. */
export function parseJson(body: Buffer): unknown {
	const text = decodeUtf8(body);
	if (text.trim() === '') throw new DomainError('malformedBody', 'The body is empty.');
	try {
		return JSON.parse(text);
	} catch (error) {
		const index = jsonFaultIndex(text);
		const where =
			index === null ? '' : ` from byte ${byteOffset(body, text, index)} of ${body.length} on`;
		throw new DomainError(
			'malformedBody',
			`The body is not JSON${where}: ${(error as Error).message}`
		);
	}
}

/** Reads a JSON body and parses it with a schema; who may not is refused before anything is read. */
export async function readJson<Schema extends z.ZodType>(
	event: Pick<RequestEvent, 'locals' | 'request'>,
	permission: Permission,
	schema: Schema
): Promise<z.output<Schema>> {
	requirePermission(event.locals.actor, permission);
	if (mediaTypeOf(event.request) !== 'application/json') {
		throw new DomainError('unsupportedMediaType', 'Send application/json.');
	}
	return parseInput(schema, parseJson(await readBody(event.request, JSON_LIMIT_BYTES)));
}
