import { createECDH, randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import type { IncomingMessage } from 'node:http';
import { join } from 'node:path';
import { readBody, readJson, RequestError, serveLoopback, type Answer } from './loopbackServer';
import { deliveriesPage } from './pushServicePage';
import { closeOnSignal, isMain, portFrom } from './runAsProcess';
import { loopbackCertificate } from './selfSignedCertificate';
import { decryptPushBody, verifyVapid } from './webPushMessage';

/** What a browser's PushSubscription serialises to. */
export type Subscription = {
	endpoint: string;
	expirationTime: null;
	keys: { p256dh: string; auth: string };
};

/** One push message as the device would have got it. */
export type PushMessage = {
	deviceId: string;
	label: string;
	receivedAt: string;
	ttlS: number;
	urgency: string;
	topic: string | null;
	text: string;
};

/** How the service fails on purpose: 410 `gone`, 429 `busy` (Retry-After 30 s), 500 `error`. */
export type PushFailure = 'off' | 'gone' | 'busy' | 'error';

export type PushService = {
	/** Origin of the endpoints (TLS), the audience of a VAPID token. */
	pushOrigin: string;
	/** Origin of the JSON API and the page (plain HTTP, loopback). */
	url: string;
	/** For `ca` or NODE_EXTRA_CA_CERTS. */
	certificatePath: string;
	close: () => Promise<void>;
};

type Device = {
	id: string;
	label: string;
	/** base64url; null takes messages signed by any key. */
	applicationServerKey: string | null;
	privateKey: string;
	publicKey: string;
	auth: string;
};

const FAILURES: PushFailure[] = ['off', 'gone', 'busy', 'error'];
const KEPT_MESSAGES = 500;
// RFC 8030, section 7.2: a push service must take 4096 bytes and may refuse more.
const LARGEST_BODY_BYTES = 4096;

/**
 * Starts a Web Push service for this machine: it registers devices without a browser, checks each
 * delivery as a real service would (RFC 8030, 8291, 8292) and shows what the device would have read.
 * Devices and the certificate live in `stateDirectory`, so a later start knows them again.
 */
export async function startPushService(options: {
	pushPort: number;
	httpPort: number;
	stateDirectory: string;
}): Promise<PushService> {
	mkdirSync(options.stateDirectory, { recursive: true, mode: 0o700 });
	const certificate = loopbackCertificate(options.stateDirectory);
	const devicesPath = join(options.stateDirectory, 'devices.json');
	const devices = new Map(readDevices(devicesPath).map((device) => [device.id, device]));
	let messages: PushMessage[] = [];
	let failure: PushFailure = 'off';

	const saveDevices = () => {
		writeFileSync(`${devicesPath}.new`, JSON.stringify([...devices.values()]), { mode: 0o600 });
		renameSync(`${devicesPath}.new`, devicesPath);
	};

	const deliver = async (request: IncomingMessage, url: URL): Promise<Answer> => {
		const body = await readBody(request, LARGEST_BODY_BYTES);
		const device = devices.get(/^\/push\/([\w-]+)$/.exec(url.pathname)?.[1] ?? '');
		if (request.method !== 'POST') throw new RequestError(405, 'POST a message');
		if (failure === 'busy') return { status: 429, headers: { 'Retry-After': '30' } };
		if (failure === 'error') throw new RequestError(500, 'Failing on purpose');
		if (failure === 'gone' || !device) throw new RequestError(410, 'No such subscription');
		const ttlS = Number(request.headers.ttl ?? NaN);
		if (!Number.isInteger(ttlS) || ttlS < 0) throw new RequestError(400, 'TTL is missing');
		if (request.headers['content-encoding'] !== 'aes128gcm') {
			throw new RequestError(415, 'Content-Encoding must be aes128gcm');
		}
		const { key } = orRefuse(401, () =>
			verifyVapid(request.headers.authorization ?? '', tls.origin, Date.now())
		);
		if (device.applicationServerKey && device.applicationServerKey !== key) {
			throw new RequestError(403, 'Signed by another key than the subscription was made for');
		}
		const text = orRefuse(400, () =>
			decryptPushBody(body, {
				privateKey: Buffer.from(device.privateKey, 'base64url'),
				publicKey: Buffer.from(device.publicKey, 'base64url'),
				authSecret: Buffer.from(device.auth, 'base64url')
			})
		).toString('utf8');
		messages.unshift({
			deviceId: device.id,
			label: device.label,
			receivedAt: new Date().toISOString(),
			ttlS,
			urgency: header(request, 'urgency') ?? 'normal',
			topic: header(request, 'topic'),
			text
		});
		messages = messages.slice(0, KEPT_MESSAGES);
		return {
			status: 201,
			headers: { Location: `${tls.origin}/message/${randomBytes(9).toString('hex')}` }
		};
	};

	const register = (wanted: Record<string, unknown>): Answer => {
		const agreement = createECDH('prime256v1');
		agreement.generateKeys();
		const device: Device = {
			id: randomBytes(18).toString('base64url'),
			label: typeof wanted.label === 'string' ? wanted.label.slice(0, 80) : 'a device',
			applicationServerKey:
				typeof wanted.applicationServerKey === 'string'
					? wanted.applicationServerKey.replace(/=+$/, '')
					: null,
			privateKey: agreement.getPrivateKey('base64url'),
			publicKey: agreement.getPublicKey('base64url'),
			auth: randomBytes(16).toString('base64url')
		};
		devices.set(device.id, device);
		saveDevices();
		const subscription: Subscription = {
			endpoint: `${tls.origin}/push/${device.id}`,
			expirationTime: null,
			keys: { p256dh: device.publicKey, auth: device.auth }
		};
		return { status: 201, json: { id: device.id, subscription } };
	};

	const control = async (request: IncomingMessage, url: URL): Promise<Answer> => {
		const device = url.searchParams.get('device');
		switch (`${request.method} ${url.pathname}`) {
			case 'GET /':
				return {
					status: 200,
					headers: { 'Content-Type': 'text/html; charset=utf-8' },
					body: deliveriesPage(messages, devices.size)
				};
			case 'POST /api/subscriptions':
				return register(await readJson(request));
			case 'DELETE /api/subscriptions':
				// What a browser does when its person withdraws consent: the endpoint answers 410 from now on.
				devices.delete(device ?? '');
				saveDevices();
				return { status: 204 };
			case 'GET /api/messages':
				return {
					status: 200,
					json: device ? messages.filter(({ deviceId }) => deviceId === device) : messages
				};
			case 'DELETE /api/messages':
				messages = [];
				return { status: 204 };
			case 'POST /api/fail': {
				const { mode } = await readJson(request);
				const wanted = FAILURES.find((known) => known === mode);
				if (!wanted) throw new RequestError(400, `mode must be one of ${FAILURES.join(', ')}`);
				failure = wanted;
				return { status: 200, json: { mode: failure } };
			}
			default:
				return { status: 404, json: { error: 'Nothing here' } };
		}
	};

	const tls = await serveLoopback(deliver, options.pushPort, certificate);
	const web = await serveLoopback(control, options.httpPort);
	return {
		pushOrigin: tls.origin,
		url: web.origin,
		certificatePath: certificate.certificatePath,
		close: async () => {
			await Promise.all([tls.close(), web.close()]);
		}
	};
}

function readDevices(path: string): Device[] {
	if (!existsSync(path)) return [];
	try {
		return JSON.parse(readFileSync(path, 'utf8')) as Device[];
	} catch {
		// Cut off while writing: devices can be registered again.
		return [];
	}
}

function header(request: IncomingMessage, name: string): string | null {
	const value = request.headers[name];
	return typeof value === 'string' ? value : null;
}

function orRefuse<T>(status: number, check: () => T): T {
	try {
		return check();
	} catch (error) {
		throw new RequestError(status, error instanceof Error ? error.message : String(error));
	}
}

if (isMain(import.meta.url)) {
	const stateDirectory = process.env.DUSKLINE_PUSH_STATE;
	if (!stateDirectory) throw new Error('DUSKLINE_PUSH_STATE must name a folder');
	const service = await startPushService({
		pushPort: portFrom('DUSKLINE_PUSH_PORT'),
		httpPort: portFrom('DUSKLINE_PUSH_PAGE_PORT'),
		stateDirectory
	});
	closeOnSignal(service.close);
	console.log(`Push service: ${service.pushOrigin}, what came: ${service.url}`);
}
