import { request } from 'node:http';
import { createTransport } from 'nodemailer';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startMailbox, type Mail, type Mailbox } from './mailbox';

let mailbox: Mailbox;

beforeEach(async () => {
	mailbox = await startMailbox({ smtp: 0, http: 0 });
});
afterEach(() => mailbox.close());

const send = (to: string, text: string, html?: string) =>
	createTransport(mailbox.smtpUrl).sendMail({
		from: 'Duskline <duskline@localhost>',
		to,
		subject: 'Position to 3″ <b>',
		text,
		...(html ? { html } : {})
	});

const messages = async (query = ''): Promise<Mail[]> =>
	(await (await fetch(`${mailbox.url}/api/messages${query}`)).json()) as Mail[];

const fail = (mode: string) =>
	fetch(`${mailbox.url}/api/fail`, { method: 'POST', body: JSON.stringify({ mode }) });

describe('the mailbox', () => {
	it('lists what came by recipient, newest first, decoded', async () => {
		await send('Ada@Example.org', 'first');
		await send('ben@example.org', 'other');
		await send('ada@example.org', 'Grüße ★');
		const found = await messages('?to=ADA@example.org');
		expect(found.map(({ text }) => text.trim())).toEqual(['Grüße ★', 'first']);
		expect(found[0]).toMatchObject({
			from: 'duskline@localhost',
			subject: 'Position to 3″ <b>'
		});
		expect(await messages()).toHaveLength(3);
	});

	it('shows a mail with its links to follow and nothing of its markup run', async () => {
		await send(
			'ada@example.org',
			'Sign in: http://127.0.0.1/in?a=1&b=2\n<script>',
			'<p>markup</p>'
		);
		const page = await (await fetch(`${mailbox.url}/mail/1`)).text();
		expect(page).toContain('href="http://127.0.0.1/in?a=1&#38;b=2"');
		expect(page).not.toContain('<script');
		expect(page).toContain('3″ &#60;b&#62;');
		const markup = await fetch(`${mailbox.url}/mail/1/html`);
		expect(markup.headers.get('content-security-policy')).toContain('sandbox');
		expect(await (await fetch(mailbox.url)).text()).toContain('to ada@example.org');
	});

	it('forgets everything when told to', async () => {
		await send('ada@example.org', 'first');
		await fetch(`${mailbox.url}/api/messages`, { method: 'DELETE' });
		expect(await messages()).toEqual([]);
	});

	it('fails on purpose and recovers', async () => {
		await fail('reject');
		await expect(send('ada@example.org', 'x')).rejects.toMatchObject({ responseCode: 550 });
		await fail('defer');
		await expect(send('ada@example.org', 'x')).rejects.toMatchObject({ responseCode: 451 });
		await fail('drop');
		await expect(send('ada@example.org', 'x')).rejects.toThrow();
		expect((await fail('sometimes')).status).toBe(400);
		await fail('off');
		await send('ada@example.org', 'through');
		expect(await messages()).toHaveLength(1);
	});

	it('answers no other host name', async () => {
		const status = await new Promise<number | undefined>((resolve, reject) => {
			request(`${mailbox.url}/`, { headers: { Host: 'rebound.example' } }, (response) => {
				response.resume();
				resolve(response.statusCode);
			})
				.on('error', reject)
				.end();
		});
		expect(status).toBe(421);
	});
});
