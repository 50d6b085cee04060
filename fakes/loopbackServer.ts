import { once } from 'node:events';
import {
	createServer,
	type IncomingMessage,
	type RequestListener,
	type Server,
	type ServerResponse
} from 'node:http';
import { createServer as createTlsServer } from 'node:https';

export type Answer = {
	status: number;
	headers?: Record<string, string>;
	body?: string | Buffer;
	json?: unknown;
};

export type Handler = (request: IncomingMessage, url: URL) => Promise<Answer> | Answer;

export type LoopbackServer = { port: number; origin: string; close: () => Promise<void> };

/** A request whose fault is the caller's; its message is the answer. */
export class RequestError extends Error {
	constructor(
		readonly status: number,
		message: string
	) {
		super(message);
	}
}

const LOOPBACK_HOSTS = ['127.0.0.1', 'localhost', '[::1]'];

/**
 * Serves `handler` on 127.0.0.1 (port 0 picks a free one); with a certificate, by TLS. Requests for
 * any other host name are refused, so that no web page can reach a fake by rebinding its own name.
 */
export async function serveLoopback(
	handler: Handler,
	port: number,
	tls?: { keyPem: string; certificatePem: string }
): Promise<LoopbackServer> {
	const listener: RequestListener = (request, response) => {
		void answer(handler, request, response);
	};
	const server: Server = tls
		? createTlsServer({ key: tls.keyPem, cert: tls.certificatePem }, listener)
		: createServer(listener);
	server.listen(port, '127.0.0.1');
	await once(server, 'listening');
	const address = server.address();
	if (!address || typeof address === 'string') throw new Error('No TCP address');
	return {
		port: address.port,
		origin: `${tls ? 'https' : 'http'}://127.0.0.1:${address.port}`,
		close: async () => {
			const closed = once(server, 'close');
			server.close();
			server.closeAllConnections();
			await closed;
		}
	};
}

/** The request's body, refused past `limitBytes`. */
export async function readBody(request: IncomingMessage, limitBytes = 65_536): Promise<Buffer> {
	const chunks: Buffer[] = [];
	let sizeBytes = 0;
	for await (const chunk of request as AsyncIterable<Buffer>) {
		sizeBytes += chunk.length;
		if (sizeBytes <= limitBytes) chunks.push(chunk);
	}
	if (sizeBytes > limitBytes) throw new RequestError(413, `More than ${limitBytes} bytes`);
	return Buffer.concat(chunks);
}

/** The request's body as a JSON object; an empty body is an empty object. */
export async function readJson(request: IncomingMessage): Promise<Record<string, unknown>> {
	const text = (await readBody(request)).toString('utf8');
	if (text === '') return {};
	try {
		const value: unknown = JSON.parse(text);
		if (value && typeof value === 'object' && !Array.isArray(value)) {
			return value as Record<string, unknown>;
		}
	} catch {
		// Answered below, like any other body that is not an object.
	}
	throw new RequestError(400, 'The body must be a JSON object');
}

async function answer(
	handler: Handler,
	request: IncomingMessage,
	response: ServerResponse
): Promise<void> {
	let result: Answer;
	try {
		const url = new URL(request.url ?? '/', `http://${request.headers.host ?? 'invalid'}`);
		if (!LOOPBACK_HOSTS.includes(url.hostname)) {
			throw new RequestError(421, 'Only for this machine');
		}
		result = await handler(request, url);
	} catch (error) {
		result =
			error instanceof RequestError
				? { status: error.status, json: { error: error.message } }
				: { status: 500, json: { error: String(error) } };
	}
	const body = result.json === undefined ? (result.body ?? '') : JSON.stringify(result.json);
	response.writeHead(result.status, {
		'Cache-Control': 'no-store',
		'X-Content-Type-Options': 'nosniff',
		...(result.json === undefined ? {} : { 'Content-Type': 'application/json' }),
		...result.headers
	});
	response.end(body);
}
