import { expect, test } from '@playwright/test';
import { addresses } from './support/addresses';
import { signInAs } from './support/signIn';

// About the system that sends it, so that no alert comes of it and no other test sees one.
const NOTICE = `<?xml version="1.0" encoding="UTF-8"?>
<voe:VOEvent xmlns:voe="http://www.ivoa.net/xml/VOEvent/v2.0" version="2.0" role="utility"
	ivorn="ivo://carapace.example/alerts#notice"><Description>Back in service.</Description></voe:VOEvent>`;

test('a stream’s socket is connected, and what the broker sends is acknowledged', async ({
	page
}) => {
	await signInAs(page, 'steward');
	await page.goto('/network/streams/carapace');
	const sockets = page.getByRole('region', { name: 'Live sockets' });
	// A worker may take it up some seconds after the start.
	await expect(async () => {
		await page.reload();
		await expect(sockets.getByText('Connected', { exact: true })).toBeVisible({ timeout: 1000 });
	}).toPass();
	const events = `${addresses().brokerUrl}/api/events`;
	expect((await fetch(events, { method: 'POST', body: NOTICE })).status).toBe(202);
	await expect(async () => {
		const sent = (await (await fetch(events)).json()) as { events: { state: string }[] };
		expect(sent.events.map(({ state }) => state)).toEqual(['acked']);
	}).toPass();
});

test('a steward adds a socket, reads why it does not connect, and removes it', async ({ page }) => {
	await signInAs(page, 'steward');
	await page.goto('/network/streams/needle');
	const sockets = page.getByRole('region', { name: 'Live sockets' });
	await sockets.getByRole('textbox', { name: 'Host' }).fill('http://127.0.0.1');
	await sockets.getByRole('textbox', { name: 'Port' }).fill('1');
	await sockets.getByRole('button', { name: 'Add a socket' }).click();
	await expect(sockets.getByText('A name or address alone')).toBeVisible();
	await sockets.getByRole('textbox', { name: 'Host' }).fill('127.0.0.1');
	await sockets.getByRole('button', { name: 'Add a socket' }).click();
	await expect(sockets.getByText('127.0.0.1:1')).toBeVisible();
	await expect(async () => {
		await page.reload();
		await expect(sockets.getByText('Nothing listens at this address')).toBeVisible({
			timeout: 1000
		});
	}).toPass();
	await sockets.getByRole('button', { name: 'Switch off the socket to 127.0.0.1:1' }).click();
	await expect(sockets.getByText('Off', { exact: true })).toBeVisible();
	await sockets.getByRole('button', { name: 'Remove the socket to 127.0.0.1:1' }).click();
	await expect(sockets.getByText('None.')).toBeVisible();
});
