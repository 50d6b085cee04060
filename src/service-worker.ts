/// <reference lib="webworker" />

/** What the server sends (notify/pusher.ts). */
type PushMessage = { title: string; body: string; url: string; tag: string };

const worker = globalThis as unknown as ServiceWorkerGlobalScope;

worker.addEventListener('install', () => void worker.skipWaiting());
worker.addEventListener('activate', (event) => event.waitUntil(worker.clients.claim()));

worker.addEventListener('push', (event) => {
	const message = readMessage(event.data);
	event.waitUntil(
		worker.registration.showNotification(message.title, {
			body: message.body,
			tag: message.tag,
			icon: '/icon-192.png',
			badge: '/icon-192.png',
			data: { url: message.url }
		})
	);
});

worker.addEventListener('notificationclick', (event) => {
	event.notification.close();
	const { url } = event.notification.data as { url: string };
	event.waitUntil(openPage(url));
});

/** A message that can't be read is still shown: browsers withdraw consent from silent pushes. */
function readMessage(data: PushMessageData | null): PushMessage {
	const fallback = { title: 'Duskline', body: 'There is news.', url: '/circulars', tag: 'news' };
	try {
		const { title, body, url, tag } = data?.json() as Partial<PushMessage>;
		return {
			title: title ?? fallback.title,
			body: body ?? fallback.body,
			// Pages of this origin only.
			url:
				url && new URL(url, worker.location.origin).origin === worker.location.origin
					? url
					: fallback.url,
			tag: tag ?? fallback.tag
		};
	} catch {
		return fallback;
	}
}

async function openPage(path: string): Promise<void> {
	const target = new URL(path, worker.location.origin).href;
	const open = await worker.clients.matchAll({ type: 'window', includeUncontrolled: true });
	const same = open.find((client) => client.url === target) ?? open[0];
	if (!same) {
		await worker.clients.openWindow(target);
		return;
	}
	await same.focus();
	// A page that is not under this worker's control can't be led elsewhere.
	if (same.url !== target) {
		await same.navigate(target).catch(() => worker.clients.openWindow(target));
	}
}
