import { createHash, randomUUID } from 'node:crypto';
import {
	appendFileSync,
	createWriteStream,
	existsSync,
	mkdirSync,
	readFileSync,
	renameSync,
	rmSync,
	statSync
} from 'node:fs';
import type { IncomingMessage } from 'node:http';
import { join } from 'node:path';
import { pipeline } from 'node:stream/promises';
import { readBody, readJson, RequestError, serveLoopback, type Answer } from './loopbackServer';
import { closeOnSignal, isMain, portFrom } from './runAsProcess';
import { verifySignature } from './signatureV4';

/** How the storage fails on purpose: 503 `error`, or `lost`: every file is gone (404). */
export type StorageFailure = 'off' | 'error' | 'lost';

export type StorageKeys = { bucket: string; accessKey: string; secretKey: string };

const FAILURES: StorageFailure[] = ['off', 'error', 'lost'];
const XML = { 'Content-Type': 'application/xml' };

/**
 * Starts object storage for this machine: PUT, GET, HEAD and DELETE of objects and uploads in parts, as the S3 API
 * has them, path-style, each with its signature checked. Files live in `stateDirectory`.
 */
export async function startObjectStore(
	options: { port: number; stateDirectory: string } & StorageKeys
): Promise<{ url: string; close: () => Promise<void> }> {
	const { stateDirectory, bucket } = options;
	const parts = join(stateDirectory, 'parts');
	rmSync(parts, { recursive: true, force: true });
	mkdirSync(parts, { recursive: true, mode: 0o700 });
	let failure: StorageFailure = 'off';

	const handle = async (request: IncomingMessage, url: URL): Promise<Answer> => {
		if (url.pathname === '/-/fail' && request.method === 'POST') {
			const { mode } = await readJson(request);
			const wanted = FAILURES.find((known) => known === mode);
			if (!wanted) throw new RequestError(400, `mode must be one of ${FAILURES.join(', ')}`);
			failure = wanted;
			return { status: 200, json: { mode: failure } };
		}
		if (url.pathname === '/') return { status: 200, body: 'Object storage of this machine\n' };
		verifySignature(request, url, options, Date.now());
		if (failure === 'error') return refusal(503, 'SlowDown', 'Failing on purpose');
		const key = url.pathname.startsWith(`/${bucket}/`) ? url.pathname.slice(bucket.length + 2) : '';
		if (key === '') return refusal(404, 'NoSuchBucket', 'There is no such bucket');
		return object(request, url, key);
	};

	const object = async (request: IncomingMessage, url: URL, key: string): Promise<Answer> => {
		const path = join(stateDirectory, encodeURIComponent(key));
		const uploadId = url.searchParams.get('uploadId');
		if (uploadId && !/^[\w-]+$/.test(uploadId)) throw new RequestError(400, 'uploadId');
		const partPath = (number: string) => join(parts, `${uploadId}.${number}`);
		switch (`${request.method}${url.searchParams.has('uploads') ? ' uploads' : ''}`) {
			case 'PUT': {
				const number = url.searchParams.get('partNumber') ?? '';
				if (uploadId && !/^\d{1,5}$/.test(number)) throw new RequestError(400, 'partNumber');
				const etag = await keep(request, uploadId ? partPath(number) : path);
				return { status: 200, headers: { ETag: etag } };
			}
			case 'POST uploads':
				return {
					status: 200,
					headers: XML,
					body: `<InitiateMultipartUploadResult><Bucket>${bucket}</Bucket><Key>${key}</Key><UploadId>${randomUUID()}</UploadId></InitiateMultipartUploadResult>`
				};
			case 'POST': {
				const numbers = [
					...(await readBody(request)).toString('utf8').matchAll(/<PartNumber>(\d+)</g)
				].map((match) => match[1] ?? '');
				if (!uploadId || numbers.length === 0) return refusal(400, 'MalformedXML', 'No parts');
				const whole = join(parts, `${uploadId}.whole`);
				for (const number of numbers) {
					const piece = partPath(number);
					if (!existsSync(piece)) return refusal(400, 'InvalidPart', `Part ${number} is missing`);
					appendFileSync(whole, readFileSync(piece));
					rmSync(piece);
				}
				renameSync(whole, path);
				return {
					status: 200,
					headers: XML,
					body: `<CompleteMultipartUploadResult><Key>${key}</Key><ETag>"${uploadId}"</ETag></CompleteMultipartUploadResult>`
				};
			}
			case 'DELETE':
				if (!uploadId) rmSync(path, { force: true });
				return { status: 204 };
			case 'HEAD':
			case 'GET': {
				if (failure === 'lost' || !existsSync(path)) {
					return refusal(404, 'NoSuchKey', 'There is no such object');
				}
				const length = String(statSync(path).size);
				const headers = { 'Content-Type': 'application/octet-stream', 'Content-Length': length };
				return request.method === 'HEAD'
					? { status: 200, headers }
					: { status: 200, headers, body: readFileSync(path) };
			}
			default:
				return refusal(405, 'MethodNotAllowed', 'Not here');
		}
	};

	const server = await serveLoopback(handle, options.port);
	return { url: server.origin, close: server.close };
}

/** Writes a body to a file once it is here whole and is what was signed; its ETag. */
async function keep(request: IncomingMessage, path: string): Promise<string> {
	const arriving = `${path}.${randomUUID()}`;
	const sha256 = createHash('sha256');
	const md5 = createHash('md5');
	request.on('data', (piece: Buffer) => {
		sha256.update(piece);
		md5.update(piece);
	});
	await pipeline(request, createWriteStream(arriving, { mode: 0o600 }));
	if (sha256.digest('hex') !== request.headers['x-amz-content-sha256']) {
		rmSync(arriving);
		throw new RequestError(400, 'x-amz-content-sha256 is not the body’s');
	}
	renameSync(arriving, path);
	return `"${md5.digest('hex')}"`;
}

function refusal(status: number, code: string, message: string): Answer {
	const body = `<Error><Code>${code}</Code><Message>${message}</Message></Error>`;
	return { status, headers: XML, body };
}

function needed(variable: string): string {
	const value = process.env[variable];
	if (!value) throw new Error(`${variable} must be set`);
	return value;
}

if (isMain(import.meta.url)) {
	const store = await startObjectStore({
		port: portFrom('DUSKLINE_STORAGE_PORT'),
		stateDirectory: needed('DUSKLINE_STORAGE_STATE'),
		bucket: needed('STORAGE_BUCKET'),
		accessKey: needed('STORAGE_ACCESS_KEY'),
		secretKey: needed('STORAGE_SECRET_KEY')
	});
	closeOnSignal(store.close);
	console.log(`Object storage: ${store.url}`);
}
