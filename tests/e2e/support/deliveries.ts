import { setTimeout as delay } from 'node:timers/promises';
import type { Mail, MailboxFailure } from '../../../fakes/mailbox';
import type { PushFailure, PushMessage, Subscription } from '../../../fakes/pushService';
import { addresses } from './addresses';

const PATIENCE_MS = 20_000;

/** The newest mail to an address (whose subject holds `subject`), waiting up to 20 s for it. */
export function latestMail(to: string, subject = ''): Promise<Mail> {
	const { mailboxUrl } = addresses();
	return eventually(`a mail to ${to} about "${subject}"`, async () => {
		const mails = (await read(`${mailboxUrl}/api/messages?to=${encodeURIComponent(to)}`)) as Mail[];
		return mails.find((mail) => mail.subject.includes(subject));
	});
}

/** Empties the mailbox. */
export async function forgetMail(): Promise<void> {
	await fetch(`${addresses().mailboxUrl}/api/messages`, { method: 'DELETE' });
}

/** Makes the mailbox fail, or with `off` work again. */
export async function failMail(mode: MailboxFailure): Promise<void> {
	await postJson(`${addresses().mailboxUrl}/api/fail`, { mode });
}

/** A device of the fake push service, with what a browser would hand to the application. */
export async function registerPushDevice(
	label: string,
	applicationServerKey?: string
): Promise<{ id: string; subscription: Subscription }> {
	const response = await postJson(`${addresses().pushUrl}/api/subscriptions`, {
		label,
		applicationServerKey
	});
	return (await response.json()) as { id: string; subscription: Subscription };
}

/** The newest message a device got (whose text holds `text`), waiting up to 20 s for it. */
export function latestPush(deviceId: string, text = ''): Promise<PushMessage> {
	const url = `${addresses().pushUrl}/api/messages?device=${deviceId}`;
	return eventually(`a push message about "${text}"`, async () =>
		((await read(url)) as PushMessage[]).find((message) => message.text.includes(text))
	);
}

/** Makes the push service fail, or with `off` work again. */
export async function failPush(mode: PushFailure): Promise<void> {
	await postJson(`${addresses().pushUrl}/api/fail`, { mode });
}

async function eventually<T>(what: string, look: () => Promise<T | undefined>): Promise<T> {
	const deadlineMs = Date.now() + PATIENCE_MS;
	while (Date.now() < deadlineMs) {
		const found = await look();
		if (found !== undefined) return found;
		await delay(200);
	}
	throw new Error(`Within ${PATIENCE_MS / 1000} s there was not ${what}`);
}

async function read(url: string): Promise<unknown> {
	return (await fetch(url)).json();
}

function postJson(url: string, body: unknown): Promise<Response> {
	return fetch(url, { method: 'POST', body: JSON.stringify(body) });
}
