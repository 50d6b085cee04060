import { createHash } from 'node:crypto';
import { Agent } from 'node:https';
import webPush from 'web-push';
import type { Config } from '../config';
import { mayBePublicEndpoint, publicAgent } from './publicEndpoint';

/** Largest plaintext that every push service takes: 4096 bytes less the encryption's own (RFC 8291). */
export const LARGEST_PUSH_BYTES = 3993;

export type PushMessage = {
	/** Shown on a locked screen: nothing that is not public. */
	title: string;
	body: string;
	/** Path within the application that a tap opens. */
	url: string;
	/** A later message with the same tag takes the earlier one's place on the device. */
	tag: string;
};

export type PushTarget = { endpoint: string; p256dh: string; auth: string };

/** `gone`: the browser has withdrawn its consent. */
export type PushOutcome =
	{ kind: 'accepted' } | { kind: 'gone' } | { kind: 'failed'; error: string };

export type Pusher = {
	send: (
		target: PushTarget,
		message: PushMessage,
		options: { ttlS: number; topicOf: string }
	) => Promise<PushOutcome>;
};

/** Web Push (RFC 8030, 8291, 8292); null without VAPID keys. `agent` replaces the network's. */
export function createPusher(config: Pick<Config, 'vapid' | 'demo'>, agent?: Agent): Pusher | null {
	const vapid = config.vapid;
	if (!vapid) return null;
	// The demo's push service is on this machine.
	const open = agent ?? (config.demo ? new Agent({ keepAlive: true }) : publicAgent());
	return {
		async send({ endpoint, p256dh, auth }, message, { ttlS, topicOf }) {
			if (!config.demo && !mayBePublicEndpoint(endpoint)) {
				return { kind: 'failed', error: 'Not a public push service' };
			}
			try {
				await webPush.sendNotification({ endpoint, keys: { p256dh, auth } }, payload(message), {
					vapidDetails: vapid,
					TTL: ttlS,
					topic: pushTopic(topicOf),
					urgency: 'high',
					contentEncoding: 'aes128gcm',
					timeout: 10_000,
					agent: open
				});
				return { kind: 'accepted' };
			} catch (error) {
				if (!(error instanceof webPush.WebPushError)) {
					return { kind: 'failed', error: (error as Error).message };
				}
				if (error.statusCode === 404 || error.statusCode === 410) return { kind: 'gone' };
				return { kind: 'failed', error: `The push service answered ${error.statusCode}` };
			}
		}
	};
}

const pushers = new Map<string, Pusher | null>();

/** The process's pusher for this configuration. */
export function pusher(config: Pick<Config, 'vapid' | 'demo'>): Pusher | null {
	const key = `${config.vapid?.publicKey} ${config.demo}`;
	if (!pushers.has(key)) pushers.set(key, createPusher(config));
	return pushers.get(key)!;
}

/** A topic of 32 base64url characters, the longest that RFC 8030 (section 5.4) allows. */
export function pushTopic(subject: string): string {
	return createHash('sha256').update(subject).digest('base64url').slice(0, 32);
}

/** The message as JSON of at most 3993 bytes: the body is cut, at whole characters, until it fits. */
export function payload(message: PushMessage): string {
	const characters = [...message.body];
	for (let kept = Math.min(characters.length, 400); ; kept = Math.floor(kept * 0.8)) {
		const cut = kept < characters.length;
		const body = characters.slice(0, kept).join('') + (cut ? '…' : '');
		const text = JSON.stringify({ ...message, body });
		if (Buffer.byteLength(text) <= LARGEST_PUSH_BYTES || kept === 0) return text;
	}
}
