import { MOST_PUSH_DEVICES, type PushDevice, type PushDeviceInput } from '../../domain/preferences';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { markPushSent, removePushTarget } from '../circulars/deliveryStore';
import { subscription } from '../db/schema/circulars';
import { DomainError } from '../domainError';
import { mayBePublicEndpoint } from './publicEndpoint';
import {
	countPushDevices,
	findPushDevice,
	keepPushDevice,
	readOwnPushDevice,
	readPushDevices,
	removeOwnPushDevice
} from './pushDeviceStore';
import { pusher, type Pusher } from './pusher';

/** A test message is of no use to anybody after this long. */
const TEST_TTL_S = 120;
/** Between two test messages to one device. */
const TEST_PAUSE_MS = 5_000;

export function pushKey(app: App, actor: Actor | null): { publicKey: string | null } {
	requirePermission(actor, 'setPreferences');
	return { publicKey: app.config.vapid?.publicKey ?? null };
}

export async function listPushDevices(app: App, actor: Actor | null): Promise<PushDevice[]> {
	requirePermission(actor, 'setPreferences');
	return readPushDevices(app.database, actor.id);
}

/**
 * Keeps a browser that has allowed push, and turns push on for its owner. A browser that somebody
 * else used before changes hands only with the same keys, which nobody but that browser knows.
 */
export async function registerPushDevice(
	app: App,
	actor: Actor | null,
	input: PushDeviceInput
): Promise<{ id: string }> {
	requirePermission(actor, 'setPreferences');
	requirePushKeys(app);
	if (!app.config.demo && !mayBePublicEndpoint(input.endpoint)) {
		throw new DomainError('invalid', 'That is not a push service.', [
			{ pointer: '/endpoint', detail: 'must be the address of a public push service' }
		]);
	}
	return app.database.transaction(async (tx) => {
		const known = await findPushDevice(tx, input.endpoint);
		const sameKeys = known?.p256dh === input.keys.p256dh && known.auth === input.keys.auth;
		if (known && known.personId !== actor.id && !sameKeys) {
			throw new DomainError('nameTaken', 'This device is registered to somebody else.');
		}
		if (known?.personId !== actor.id) requireRoom(await countPushDevices(tx, actor.id));
		const id = await keepPushDevice(tx, actor.id, input, app.now());
		await tx
			.insert(subscription)
			.values({ personId: actor.id, byEmail: false, byPush: true, updatedAt: app.now() })
			.onConflictDoUpdate({
				target: subscription.personId,
				set: { byPush: true, updatedAt: app.now() }
			});
		return { id };
	});
}

export async function removePushDevice(
	app: App,
	actor: Actor | null,
	deviceId: string
): Promise<void> {
	requirePermission(actor, 'setPreferences');
	if (!(await removeOwnPushDevice(app.database, actor.id, deviceId))) {
		throw new DomainError('notFound', 'You have no such device.');
	}
}

/** Sends a message to one's own device; one whose browser has withdrawn is forgotten. */
export async function sendTestPush(
	app: App,
	actor: Actor | null,
	deviceId: string,
	sender: Pusher | null = pusher(app.config)
): Promise<{ sent: true }> {
	requirePermission(actor, 'setPreferences');
	requirePushKeys(app);
	const device = await readOwnPushDevice(app.database, actor.id, deviceId);
	if (!device || !sender) throw new DomainError('notFound', 'You have no such device.');
	const since = app.now().getTime() - (device.lastSentAt?.getTime() ?? 0);
	if (since < TEST_PAUSE_MS) {
		throw new DomainError('wrongState', 'One was sent just now. Wait a few seconds.');
	}
	const outcome = await sender.send(
		device,
		{
			title: 'Duskline test',
			body: `Push works on ${device.name}.`,
			url: '/my/preferences',
			tag: 'test'
		},
		{ ttlS: TEST_TTL_S, topicOf: `test ${device.id}` }
	);
	if (outcome.kind === 'gone') {
		await removePushTarget(app.database, device.id);
		throw new DomainError(
			'wrongState',
			`${device.name} no longer allows push and was taken off the list.`
		);
	}
	if (outcome.kind === 'failed') {
		throw new DomainError('unavailable', `It could not be sent: ${outcome.error}.`);
	}
	await markPushSent(app.database, device.id, app.now());
	return { sent: true };
}

function requirePushKeys(app: App): void {
	if (!app.config.vapid) {
		throw new DomainError('unavailable', 'This installation sends no push messages.');
	}
}

function requireRoom(devices: number): void {
	if (devices >= MOST_PUSH_DEVICES) {
		throw new DomainError(
			'invalid',
			`You have ${MOST_PUSH_DEVICES} devices already. Remove one that you no longer use.`
		);
	}
}
