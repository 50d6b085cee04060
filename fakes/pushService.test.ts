import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { Agent } from 'node:https';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import webPush from 'web-push';
import {
	startPushService,
	type PushMessage,
	type PushService,
	type Subscription
} from './pushService';
import { decryptPushBody, verifyVapid } from './webPushMessage';

const vectors = JSON.parse(readFileSync('fixtures/webPushVectors.json', 'utf8')) as {
	rfc8291_appendixA: Record<
		'plaintext' | 'ua_private' | 'ua_public' | 'auth_secret' | 'body',
		string
	>;
	rfc8292_2_4: { t: string; k: string };
};
const bytes = (text: string) => Buffer.from(text, 'base64url');

describe('a push message', () => {
	const { plaintext, ua_private, ua_public, auth_secret, body } = vectors.rfc8291_appendixA;
	const device = {
		privateKey: bytes(ua_private),
		publicKey: bytes(ua_public),
		authSecret: bytes(auth_secret)
	};

	it('decrypts to the plaintext of RFC 8291, appendix A', () => {
		expect(decryptPushBody(bytes(body), device).toString()).toBe(plaintext);
	});

	it('is refused when a bit has changed, and by another device', () => {
		const changed = bytes(body);
		changed[changed.length - 20]! ^= 1;
		expect(() => decryptPushBody(changed, device)).toThrow();
		const other = { ...device, authSecret: Buffer.alloc(16, 7) };
		expect(() => decryptPushBody(bytes(body), other)).toThrow();
		expect(() => decryptPushBody(bytes(body).subarray(0, 30), device)).toThrow(/P-256/);
	});
});

describe('a VAPID token', () => {
	const { t, k } = vectors.rfc8292_2_4;
	const header = `vapid t=${t}, k=${k}`;
	const origin = 'https://push.example.net';
	const expiresMs = 1_453_523_768_000;

	it('of RFC 8292, section 2.4, is good until it expires and for its audience only', () => {
		expect(verifyVapid(header, origin, expiresMs - 60_000).claims.sub).toBe(
			'mailto:push@example.com'
		);
		expect(() => verifyVapid(header, origin, expiresMs + 1000)).toThrow(/exp/);
		expect(() => verifyVapid(header, origin, expiresMs - 86_500_000)).toThrow(/exp/);
		expect(() => verifyVapid(header, 'https://other.example', expiresMs - 1000)).toThrow(/aud/);
	});

	it('is refused when it was signed by another key', () => {
		const other = webPush.generateVAPIDKeys().publicKey;
		expect(() => verifyVapid(`vapid t=${t}, k=${other}`, origin, expiresMs - 1000)).toThrow(
			/signed/
		);
		expect(() => verifyVapid(`Bearer ${t}`, origin, expiresMs - 1000)).toThrow(/VAPID/);
	});
});

describe('the push service', () => {
	let directory: string;
	let service: PushService;
	const vapid = webPush.generateVAPIDKeys();

	const start = (pushPort = 0) =>
		startPushService({ pushPort, httpPort: 0, stateDirectory: directory });
	beforeEach(async () => {
		directory = mkdtempSync(join(tmpdir(), 'duskline-push-'));
		service = await start();
	});
	afterEach(async () => {
		await service.close();
		rmSync(directory, { recursive: true });
	});

	const register = async (applicationServerKey?: string) => {
		const response = await fetch(`${service.url}/api/subscriptions`, {
			method: 'POST',
			body: JSON.stringify({ label: 'Night phone', applicationServerKey })
		});
		return (await response.json()) as { id: string; subscription: Subscription };
	};
	const send = (subscription: Subscription, text: string, keys = vapid) =>
		webPush.sendNotification(subscription, text, {
			vapidDetails: { subject: 'mailto:duty@example.org', ...keys },
			TTL: 60,
			urgency: 'high',
			agent: new Agent({ ca: readFileSync(service.certificatePath) })
		});
	const messages = async () =>
		(await (await fetch(`${service.url}/api/messages`)).json()) as PushMessage[];

	it('shows what the web-push library sends as the device would read it', async () => {
		const { id, subscription } = await register(vapid.publicKey);
		const { statusCode } = await send(subscription, 'D26L01-b: 1.2 deg², α Grüße');
		expect(statusCode).toBe(201);
		expect(await messages()).toMatchObject([
			{ deviceId: id, text: 'D26L01-b: 1.2 deg², α Grüße', ttlS: 60, urgency: 'high' }
		]);
		expect(await (await fetch(service.url)).text()).toContain('Night phone');
	});

	it('is not trusted by a client that was not given its certificate', async () => {
		await expect(fetch(`${service.pushOrigin}/push/x`)).rejects.toThrow();
	});

	it('refuses a sender other than the one the device subscribed to', async () => {
		const { subscription } = await register(vapid.publicKey);
		const other = webPush.generateVAPIDKeys();
		await expect(send(subscription, 'x', other)).rejects.toMatchObject({ statusCode: 403 });
		expect(await messages()).toEqual([]);
	});

	it('answers 410 once the device has unsubscribed, and fails on purpose', async () => {
		const { id, subscription } = await register();
		for (const [mode, statusCode] of [
			['busy', 429],
			['error', 500],
			['gone', 410]
		] as const) {
			await fetch(`${service.url}/api/fail`, { method: 'POST', body: JSON.stringify({ mode }) });
			await expect(send(subscription, 'x')).rejects.toMatchObject({ statusCode });
		}
		await fetch(`${service.url}/api/fail`, { method: 'POST', body: '{"mode":"off"}' });
		expect((await send(subscription, 'x')).statusCode).toBe(201);
		await fetch(`${service.url}/api/subscriptions?device=${id}`, { method: 'DELETE' });
		await expect(send(subscription, 'x')).rejects.toMatchObject({ statusCode: 410 });
	});

	it('knows its devices and certificate again after a restart', async () => {
		const { subscription } = await register();
		const port = Number(new URL(service.pushOrigin).port);
		await service.close();
		service = await start(port);
		expect((await send(subscription, 'again')).statusCode).toBe(201);
	});
});
