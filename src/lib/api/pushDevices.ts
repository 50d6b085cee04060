import type { PushDeviceInput } from '../domain/preferences';
import { postJson } from './request';

/** Whether this browser can get push messages, and whether its person has refused them. */
export function pushSupport(): 'possible' | 'denied' | 'missing' {
	if (!('serviceWorker' in navigator && 'PushManager' in window && 'Notification' in window)) {
		return 'missing';
	}
	return Notification.permission === 'denied' ? 'denied' : 'possible';
}

/** The endpoint of this browser's subscription; null when it has none. */
export async function endpointHere(): Promise<string | null> {
	if (pushSupport() === 'missing') return null;
	const registration = await navigator.serviceWorker.getRegistration();
	return (await registration?.pushManager.getSubscription())?.endpoint ?? null;
}

/** Asks for permission (call it on a gesture), subscribes this browser and registers it. Gives its endpoint. */
export async function allowPushHere(pushKey: string, name: string): Promise<string> {
	if ((await Notification.requestPermission()) !== 'granted') {
		throw new Error('The browser did not allow push messages, so nothing was changed.');
	}
	const { pushManager } = await readyWorker();
	const wanted = { userVisibleOnly: true, applicationServerKey: bytesOf(pushKey) };
	let subscription = await pushManager.getSubscription();
	// One made for another key would be refused by the push service.
	if (subscription && !madeFor(subscription, wanted.applicationServerKey)) {
		await subscription.unsubscribe();
		subscription = null;
	}
	subscription ??= await pushManager.subscribe(wanted);
	const { endpoint, keys } = subscription.toJSON();
	if (!endpoint || !keys?.p256dh || !keys.auth) {
		throw new Error('The browser gave no keys to encrypt with.');
	}
	const device: PushDeviceInput = {
		name,
		endpoint,
		keys: { p256dh: keys.p256dh, auth: keys.auth }
	};
	await postJson('/api/v1/push-devices', device);
	return endpoint;
}

/** A first guess at what to call this device. */
export function deviceName(userAgent: string): string {
	const systems = ['iPhone', 'iPad', 'Android', 'Windows', 'Macintosh', 'Linux'];
	const browsers = ['Edg', 'Firefox', 'Chrome', 'Safari'];
	const system = systems.find((word) => userAgent.includes(word)) ?? 'This device';
	const browser = browsers.find((word) => userAgent.includes(word));
	const names: Record<string, string> = { Edg: 'Edge', Macintosh: 'Mac' };
	return [names[system] ?? system, browser ? (names[browser] ?? browser) : '']
		.filter(Boolean)
		.join(', ');
}

const WORKER_TIMEOUT_MS = 10_000;

/** `ready` never settles where no worker was registered. */
function readyWorker(): Promise<ServiceWorkerRegistration> {
	return Promise.race([
		navigator.serviceWorker.ready,
		new Promise<never>((_, reject) =>
			setTimeout(
				() => reject(new Error('The page’s service worker did not start. Reload and try again.')),
				WORKER_TIMEOUT_MS
			)
		)
	]);
}

function bytesOf(base64url: string): Uint8Array<ArrayBuffer> {
	const base64 = base64url.replace(/-/g, '+').replace(/_/g, '/');
	return Uint8Array.from(atob(base64), (character) => character.charCodeAt(0));
}

function madeFor(subscription: PushSubscription, key: Uint8Array): boolean {
	const known = subscription.options.applicationServerKey;
	if (!known) return true;
	const bytes = new Uint8Array(known);
	return bytes.length === key.length && bytes.every((byte, index) => byte === key[index]);
}
