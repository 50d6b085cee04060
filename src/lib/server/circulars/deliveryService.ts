import type { App } from '../app';
import type { Config } from '../config';
import type { Transaction } from '../db/database';
import { mailer, type Mailer } from '../notify/mailer';
import { pusher, type Pusher } from '../notify/pusher';
import { circularMail, circularPush } from './circularMail';
import {
	lockQueuedDelivery,
	markPushSent,
	readPushTargets,
	readTelescopeOutlook,
	removePushTarget,
	updateDelivery,
	type QueuedDelivery
} from './deliveryStore';
import { telescopeAdvice } from './telescopeAdvice';

/** Tries before a delivery counts as failed; with the queue's growing pauses, about half an hour. */
export const MOST_DELIVERY_ATTEMPTS = 10;

/** After this long an undelivered push message has lost its worth. */
const PUSH_TTL_S = 6 * 3600;

export type Transports = { mailer: Mailer; pusher: Pusher | null };

type Outcome =
	| { kind: 'sent'; note?: string }
	| { kind: 'later'; error: string }
	| { kind: 'never'; error: string };

/**
 * Sends one queued delivery and records what came of it; throws when it should be tried again.
 * The row stays locked while it is sent, so two workers never send it at once. A crash between the
 * server's yes and the commit sends it again, under the same Message-ID, topic and tag.
 */
export async function deliverCircular(
	app: App,
	deliveryId: string,
	transports: Transports = transportsOf(app.config)
): Promise<void> {
	const again = await app.database.transaction(async (tx) => {
		const queued = await lockQueuedDelivery(tx, deliveryId);
		if (!queued) return null;
		const outcome = await send(app, tx, queued, transports);
		const attempts = queued.attempts + 1;
		const over = outcome.kind !== 'later' || attempts >= MOST_DELIVERY_ATTEMPTS;
		await updateDelivery(tx, deliveryId, {
			attempts,
			lastError: outcome.kind === 'sent' ? (outcome.note ?? null) : outcome.error.slice(0, 500),
			...(over ? { state: outcome.kind === 'sent' ? 'sent' : 'failed', endedAt: app.now() } : {})
		});
		return outcome.kind === 'later' && !over ? outcome.error : null;
	});
	if (again !== null) throw new Error(again);
}

function transportsOf(config: Config): Transports {
	return { mailer: mailer(config), pusher: pusher(config) };
}

async function send(
	app: App,
	tx: Transaction,
	queued: QueuedDelivery,
	transports: Transports
): Promise<Outcome> {
	if (queued.disabledAt) return { kind: 'never', error: 'No longer invited' };
	return queued.channel === 'email'
		? sendMail(app, tx, queued, transports.mailer)
		: sendPush(app, tx, queued, transports.pusher);
}

async function sendMail(
	app: App,
	tx: Transaction,
	queued: QueuedDelivery,
	mailer: Mailer
): Promise<Outcome> {
	const found = queued.telescopeId
		? await readTelescopeOutlook(tx, queued.transientId, queued.telescopeId)
		: null;
	try {
		await mailer.send(circularMail(queued, telescopeAdvice(found, app.now()), app.config));
		return { kind: 'sent' };
	} catch (error) {
		const { message, responseCode } = error as Error & { responseCode?: number };
		const code = (error as { code?: string }).code;
		// RFC 5321: 5yz is for good. A refused log-in (EAUTH) is ours to mend, so that is tried again.
		const forGood =
			(code === 'EENVELOPE' || code === 'EMESSAGE') &&
			responseCode !== undefined &&
			responseCode >= 500;
		return { kind: forGood ? 'never' : 'later', error: message };
	}
}

async function sendPush(
	app: App,
	tx: Transaction,
	queued: QueuedDelivery,
	pusher: Pusher | null
): Promise<Outcome> {
	if (!pusher) return { kind: 'never', error: 'This installation has no push keys' };
	const errors: string[] = [];
	let accepted = 0;
	for (const device of await readPushTargets(tx, queued.personId)) {
		const outcome = await pusher.send(device, circularPush(queued), {
			ttlS: PUSH_TTL_S,
			topicOf: queued.circularId
		});
		if (outcome.kind === 'accepted') {
			accepted++;
			await markPushSent(tx, device.id, app.now());
		} else if (outcome.kind === 'gone') {
			await removePushTarget(tx, device.id);
		} else {
			errors.push(`${device.name}: ${outcome.error}`);
		}
	}
	// One device that took it is enough: trying again would ring the others twice.
	if (accepted > 0)
		return { kind: 'sent', ...(errors.length > 0 ? { note: errors.join('; ') } : {}) };
	if (errors.length > 0) return { kind: 'later', error: errors.join('; ') };
	return { kind: 'never', error: 'No device allows push any more' };
}
