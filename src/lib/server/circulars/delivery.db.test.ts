import { randomUUID } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { Agent } from 'node:https';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import webPush from 'web-push';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { startMailbox, type Mail, type Mailbox } from '../../../../fakes/mailbox';
import {
	startPushService,
	type PushMessage,
	type PushService,
	type Subscription
} from '../../../../fakes/pushService';
import {
	NOW,
	openCircularWorld,
	type CircularWorld
} from '../../../../tests/database/circularWorld';
import type { OutlookRow } from '../../sky/outlook/outlook';
import type { Actor } from '../actor';
import { delivery, pushDevice } from '../db/schema/circulars';
import { outlook } from '../db/schema/transients';
import { createMailer } from '../notify/mailer';
import { createPusher } from '../notify/pusher';
import { publishCircular } from './circularService';
import { failForgottenDeliveries, retryDelivery } from './deliveryLedgerService';
import { deliverCircular, MOST_DELIVERY_ATTEMPTS, type Transports } from './deliveryService';

let world: CircularWorld;
let mailbox: Mailbox;
let push: PushService;
let transports: Transports;
let transientId: string;
let duty: Actor;
const state = mkdtempSync(join(tmpdir(), 'duskline-push-'));

beforeAll(async () => {
	mailbox = await startMailbox({ smtp: 0, http: 0 });
	push = await startPushService({ pushPort: 0, httpPort: 0, stateDirectory: state });
	const keys = webPush.generateVAPIDKeys();
	world = await openCircularWorld({
		SMTP_URL: mailbox.smtpUrl,
		VAPID_PUBLIC_KEY: keys.publicKey,
		VAPID_PRIVATE_KEY: keys.privateKey,
		VAPID_SUBJECT: 'mailto:steward@example.org'
	});
	transports = {
		mailer: createMailer(world.app.config),
		pusher: createPusher(world.app.config, new Agent({ ca: readFileSync(push.certificatePath) }))
	};
	duty = await world.person(['duty'], 'Ines Okafor');
	transientId = await world.transient('D26L01-b');
});
afterAll(async () => {
	transports.mailer.close();
	await world.close();
	await mailbox.close();
	await push.close();
	rmSync(state, { recursive: true, force: true });
});
beforeEach(async () => {
	await fail(mailbox.url, 'off');
	await fail(push.url, 'off');
	await fetch(`${mailbox.url}/api/messages`, { method: 'DELETE' });
	await fetch(`${push.url}/api/messages`, { method: 'DELETE' });
	await world.app.database.execute('delete from delivery');
	await world.app.database.execute('delete from push_device');
	await world.app.database.execute('delete from subscription');
});

const fail = (url: string, mode: string) =>
	fetch(`${url}/api/fail`, { method: 'POST', body: JSON.stringify({ mode }) });
const mails = async () => (await (await fetch(`${mailbox.url}/api/messages`)).json()) as Mail[];
const pushes = async () =>
	(await (await fetch(`${push.url}/api/messages`)).json()) as PushMessage[];

async function registerDevice(personId: string, name: string): Promise<string> {
	const answer = await fetch(`${push.url}/api/subscriptions`, {
		method: 'POST',
		body: JSON.stringify({ label: name })
	});
	const { id, subscription } = (await answer.json()) as { id: string; subscription: Subscription };
	await world.device(personId, name, { endpoint: subscription.endpoint, ...subscription.keys });
	return id;
}

async function publish(title = 'D26L01-b: R = 19.42', body = 'RA 05 33 36\n<b>bold?</b>') {
	const draftId = randomUUID();
	const input = { draftId, designation: 'D26L01-b', title, body };
	const { number } = await publishCircular(world.app, duty, input);
	const rows = await world.app.database
		.select()
		.from(delivery)
		.where(eq(delivery.circularId, draftId))
		.orderBy(delivery.channel);
	return { number, draftId, deliveries: rows };
}

async function rowOf(id: string) {
	const [row] = await world.app.database.select().from(delivery).where(eq(delivery.id, id));
	return row!;
}

describe('a delivery by mail', () => {
	it('reaches the partner as text and escaped HTML, once however often the job runs', async () => {
		const partner = await world.person(['partner']);
		await world.subscribe(partner.id);
		const { number, deliveries } = await publish();
		const id = deliveries[0]!.id;
		await Promise.all([1, 2, 3].map(() => deliverCircular(world.app, id, transports)));
		await deliverCircular(world.app, id, transports);
		const received = await mails();
		expect(received).toHaveLength(1);
		const mail = received[0]!;
		expect(mail.to).toEqual([partner.email]);
		expect(mail.subject).toBe(`Circular ${number}: D26L01-b: R = 19.42`);
		expect(mail.text).toContain('RA 05 33 36');
		expect(mail.text).toContain(`http://127.0.0.1:4180/my/circulars/${number}`);
		expect(mail.html).toContain('&lt;b&gt;bold?&lt;/b&gt;');
		expect(mail.html).not.toContain('<b>');
		const header = (name: string) =>
			mail.headers.find((h) => h.name.toLowerCase() === name.toLowerCase())?.value;
		expect(header('list-unsubscribe')).toBe('<http://127.0.0.1:4180/my/preferences>');
		expect(header('message-id')).toBe(`<delivery-${id}@127.0.0.1>`);
		expect(await rowOf(id)).toMatchObject({ state: 'sent', attempts: 1, lastError: null });
	});

	it('keeps a title with line breaks from adding headers', async () => {
		await world.subscribe((await world.person(['partner'])).id);
		const { deliveries } = await publish('one\r\nBcc: all@example.org\r\n\r\ntwo');
		await deliverCircular(world.app, deliveries[0]!.id, transports);
		const [mail] = await mails();
		expect(mail!.to).toHaveLength(1);
		expect(mail!.headers.some(({ name }) => name.toLowerCase() === 'bcc')).toBe(false);
		expect(mail!.subject).toContain('one Bcc: all@example.org two');
	});

	it('tells what matters at the partner’s own telescope', async () => {
		const telescopeId = await world.telescope('ALM', 'Cerro Almendra');
		const partner = await world.person(['partner']);
		await world.subscribe(partner.id, { telescopeId });
		await storeOutlook(telescopeId);
		const { deliveries } = await publish();
		await deliverCircular(world.app, deliveries[0]!.id, transports);
		const { text } = (await mails())[0]!;
		expect(text).toContain('At Cerro Almendra');
		expect(text).toContain('2026-12-01 04:44 UTC (in 32 min), until 2026-12-01 09:10 UTC');
		expect(text).toContain('54 deg (airmass 1.23)');
		expect(text).toContain('87 % of the position');
		expect(text).toContain('The site’s own limits and its safety officer decide.');
	});

	it('is tried again after a passing failure, with the error on record', async () => {
		await world.subscribe((await world.person(['partner'])).id);
		const { deliveries } = await publish();
		const id = deliveries[0]!.id;
		await fail(mailbox.url, 'defer');
		await expect(deliverCircular(world.app, id, transports)).rejects.toThrow(/451/);
		expect(await rowOf(id)).toMatchObject({ state: 'queued', attempts: 1, endedAt: null });
		expect((await rowOf(id)).lastError).toMatch(/451/);
		await fail(mailbox.url, 'drop');
		await expect(deliverCircular(world.app, id, transports)).rejects.toThrow();
		await fail(mailbox.url, 'off');
		await deliverCircular(world.app, id, transports);
		expect(await rowOf(id)).toMatchObject({ state: 'sent', attempts: 3, lastError: null });
		expect(await mails()).toHaveLength(1);
	});

	it('fails after the last try, and goes out when a steward tries again', async () => {
		await world.subscribe((await world.person(['partner'])).id);
		const { deliveries } = await publish();
		const id = deliveries[0]!.id;
		await fail(mailbox.url, 'defer');
		for (let tries = 1; tries < MOST_DELIVERY_ATTEMPTS; tries++) {
			await expect(deliverCircular(world.app, id, transports)).rejects.toThrow();
		}
		await deliverCircular(world.app, id, transports);
		expect(await rowOf(id)).toMatchObject({ state: 'failed', attempts: MOST_DELIVERY_ATTEMPTS });
		await expect(retryDelivery(world.app, duty, id)).rejects.toMatchObject({ code: 'notAllowed' });
		const steward = await world.person(['steward']);
		world.jobs.length = 0;
		await retryDelivery(world.app, steward, id);
		await expect(retryDelivery(world.app, steward, id)).rejects.toMatchObject({
			code: 'wrongState'
		});
		expect(world.jobs).toEqual([{ name: 'circular.deliver', payload: { deliveryId: id } }]);
		await fail(mailbox.url, 'off');
		await deliverCircular(world.app, id, transports);
		expect(await rowOf(id)).toMatchObject({ state: 'sent', attempts: 1 });
	});

	it('fails at once when the address is refused for good, or its owner is no longer invited', async () => {
		await world.subscribe((await world.person(['partner'])).id);
		const refused = (await publish()).deliveries[0]!.id;
		await fail(mailbox.url, 'reject');
		await deliverCircular(world.app, refused, transports);
		expect(await rowOf(refused)).toMatchObject({ state: 'failed', attempts: 1 });
		await fail(mailbox.url, 'off');
		const gone = (await publish()).deliveries[0]!.id;
		await world.app.database.execute(
			'update person set disabled_at = now() where disabled_at is null'
		);
		await deliverCircular(world.app, gone, transports);
		expect(await rowOf(gone)).toMatchObject({ state: 'failed', lastError: 'No longer invited' });
		expect(await mails()).toEqual([]);
		await world.app.database.execute('update person set disabled_at = null');
	});

	it('counts as failed when the queue has forgotten it', async () => {
		await world.subscribe((await world.person(['partner'])).id);
		const { deliveries } = await publish();
		const id = deliveries[0]!.id;
		await failForgottenDeliveries(world.app);
		expect((await rowOf(id)).state).toBe('queued');
		const later = new Date(NOW.getTime() + 4 * 3_600_000);
		await failForgottenDeliveries({ ...world.app, now: () => later });
		expect(await rowOf(id)).toMatchObject({ state: 'failed', endedAt: later });
	});
});

describe('a delivery by push', () => {
	it('reaches every device, names no position, and carries topic and lifetime', async () => {
		const partner = await world.person(['partner']);
		await world.subscribe(partner.id, { byEmail: false, byPush: true });
		await registerDevice(partner.id, 'Phone');
		await registerDevice(partner.id, 'Desk');
		const { number, deliveries } = await publish('A title that says enough');
		expect(deliveries.map(({ channel }) => channel)).toEqual(['push']);
		await deliverCircular(world.app, deliveries[0]!.id, transports);
		const received = await pushes();
		expect(received.map(({ label }) => label).sort()).toEqual(['Desk', 'Phone']);
		const message = JSON.parse(received[0]!.text) as Record<string, string>;
		expect(message).toEqual({
			title: `Circular ${number}: D26L01-b`,
			body: 'A title that says enough',
			url: `/my/circulars/${number}`,
			tag: `circular-${number}`
		});
		expect(received[0]!.topic).toMatch(/^[A-Za-z0-9_-]{32}$/);
		expect(received[0]!.ttlS).toBe(21_600);
		expect((await rowOf(deliveries[0]!.id)).state).toBe('sent');
	});

	it('forgets a device that has withdrawn, and fails when none is left', async () => {
		const partner = await world.person(['partner']);
		await world.subscribe(partner.id, { byEmail: false, byPush: true });
		const phone = await registerDevice(partner.id, 'Phone');
		await registerDevice(partner.id, 'Desk');
		await fetch(`${push.url}/api/subscriptions?device=${phone}`, { method: 'DELETE' });
		const first = (await publish()).deliveries[0]!.id;
		await deliverCircular(world.app, first, transports);
		expect((await rowOf(first)).state).toBe('sent');
		const left = await world.app.database.select().from(pushDevice);
		expect(left.map(({ name }) => name)).toEqual(['Desk']);

		const second = (await publish()).deliveries[0]!.id;
		await fail(push.url, 'gone');
		await deliverCircular(world.app, second, transports);
		expect(await rowOf(second)).toMatchObject({
			state: 'failed',
			lastError: 'No device allows push any more'
		});
		expect(await world.app.database.$count(pushDevice)).toBe(0);
	});

	it('is tried again while the push service is busy', async () => {
		const partner = await world.person(['partner']);
		await world.subscribe(partner.id, { byEmail: false, byPush: true });
		await registerDevice(partner.id, 'Phone');
		const { deliveries } = await publish();
		const id = deliveries[0]!.id;
		await fail(push.url, 'busy');
		await expect(deliverCircular(world.app, id, transports)).rejects.toThrow('429');
		expect((await rowOf(id)).lastError).toBe('Phone: The push service answered 429');
		await fail(push.url, 'off');
		await deliverCircular(world.app, id, transports);
		expect((await rowOf(id)).state).toBe('sent');
		expect(await pushes()).toHaveLength(1);
	});

	it('is not even queued without push keys or without a device', async () => {
		const partner = await world.person(['partner']);
		await world.subscribe(partner.id, { byEmail: false, byPush: true });
		expect((await publish()).deliveries).toEqual([]);
		await registerDevice(partner.id, 'Phone');
		const app = { ...world.app, config: { ...world.app.config, vapid: null } };
		const draftId = randomUUID();
		const input = { draftId, designation: 'D26L01-b', title: 'T', body: 'B' };
		await publishCircular(app, duty, input);
		expect(await world.app.database.$count(delivery, eq(delivery.circularId, draftId))).toBe(0);
	});
});

async function storeOutlook(telescopeId: string): Promise<void> {
	const startMs = NOW.getTime() + 32 * 60_000;
	const row: OutlookRow = {
		telescopeId,
		catch: 0.4,
		reach: 0.87,
		opensMs: startMs,
		windows: [
			{
				startMs,
				endMs: Date.parse('2026-12-01T09:10:00Z'),
				opensBy: 'altitude',
				endsBy: 'sun'
			}
		],
		forbidden: null,
		atOpening: {
			altDeg: 54.2,
			azDeg: 71,
			airmass: 1.23,
			moonDistanceDeg: 80,
			moonAltDeg: 12,
			moonIlluminated: 0.31,
			sunDistanceDeg: 120,
			limitMag: 20.9
		},
		plan: [],
		strip: { startMs: NOW.getTime(), stepMinutes: 15, altDeg: [], bands: [] }
	};
	await world.app.database.insert(outlook).values({
		transientId,
		regionVersion: 1,
		computedAt: NOW,
		networkCatch: 0.5,
		costOfWaitingPoints: 4,
		body: {
			computedMs: NOW.getTime(),
			rows: [row],
			networkCatch: 0.5,
			networkCatchLater: 0.46,
			costOfWaitingPoints: 4,
			networkOrder: []
		}
	});
}
