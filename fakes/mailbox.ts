import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import PostalMime from 'postal-mime';
import { SMTPServer, type SMTPServerSession } from 'smtp-server';
import { RequestError, readJson, serveLoopback, type Answer } from './loopbackServer';
import { mailListPage, mailPage } from './mailboxPages';
import { closeOnSignal, isMain, portFrom } from './runAsProcess';

/** One mail as the mailbox keeps and shows it. */
export type Mail = {
	id: string;
	receivedAt: string;
	/** Sender and recipients of the envelope, in lower case. */
	from: string;
	to: string[];
	subject: string;
	text: string;
	html: string | null;
	headers: { name: string; value: string }[];
};

/**
 * How the mailbox fails on purpose: `reject` refuses every recipient for good (550), `defer` for now
 * (451), `drop` cuts the connection in the middle of the message.
 */
export type MailboxFailure = 'off' | 'reject' | 'defer' | 'drop';

export type Mailbox = {
	smtpUrl: string;
	url: string;
	close: () => Promise<void>;
};

const FAILURES: MailboxFailure[] = ['off', 'reject', 'defer', 'drop'];
const KEPT_MAILS = 500;
const LARGEST_MAIL_BYTES = 10_000_000;

/** Starts an SMTP server that delivers nowhere, and a web page and JSON API that show what came. */
export async function startMailbox(ports: { smtp: number; http: number }): Promise<Mailbox> {
	let mails: Mail[] = [];
	let failure: MailboxFailure = 'off';
	let count = 0;

	const keep = async (raw: Buffer, session: SMTPServerSession) => {
		const parsed = await PostalMime.parse(raw);
		const sender = session.envelope.mailFrom;
		count += 1;
		mails.unshift({
			id: String(count),
			receivedAt: new Date().toISOString(),
			from: (sender ? sender.address : '').toLowerCase(),
			to: session.envelope.rcptTo.map(({ address }) => address.toLowerCase()),
			subject: parsed.subject ?? '(no subject)',
			text: parsed.text ?? '',
			html: parsed.html ?? null,
			headers: parsed.headers.map(({ originalKey, value }) => ({ name: originalKey, value }))
		});
		mails = mails.slice(0, KEPT_MAILS);
	};

	const smtp = new SMTPServer({
		name: 'mailbox.localhost',
		authOptional: true,
		disabledCommands: ['STARTTLS', 'AUTH'],
		disableReverseLookup: true,
		size: LARGEST_MAIL_BYTES,
		closeTimeout: 500,
		onRcptTo: (_address, _session, callback) => {
			if (failure === 'reject') return callback(smtpError(550, 'No such mailbox'));
			if (failure === 'defer') return callback(smtpError(451, 'Try again later'));
			callback();
		},
		onData: (stream, session, callback) => {
			if (failure === 'drop') {
				for (const { _socket } of smtp.connections as Set<{ _socket: { destroy(): void } }>) {
					_socket.destroy();
				}
				return;
			}
			const chunks: Buffer[] = [];
			stream.on('data', (chunk: Buffer) => chunks.push(chunk));
			stream.once('end', () => {
				if (stream.sizeExceeded) return callback(smtpError(552, 'Too large'));
				keep(Buffer.concat(chunks), session).then(
					() => callback(),
					() => callback(smtpError(554, 'Not a readable message'))
				);
			});
		}
	});
	// A client that goes away in mid-sentence is its own affair.
	smtp.on('error', () => undefined);
	const listening = smtp.listen(ports.smtp, '127.0.0.1');
	await once(listening, 'listening');
	const smtpPort = (listening.address() as AddressInfo).port;

	const api = async (method: string, url: URL, body: () => Promise<Record<string, unknown>>) => {
		if (method === 'GET' && url.pathname === '/api/messages') {
			const to = url.searchParams.get('to')?.toLowerCase();
			return { status: 200, json: to ? mails.filter((mail) => mail.to.includes(to)) : mails };
		}
		if (method === 'DELETE' && url.pathname === '/api/messages') {
			mails = [];
			return { status: 204 };
		}
		if (method === 'POST' && url.pathname === '/api/fail') {
			const { mode } = await body();
			const wanted = FAILURES.find((known) => known === mode);
			if (!wanted) throw new RequestError(400, `mode must be one of ${FAILURES.join(', ')}`);
			failure = wanted;
			return { status: 200, json: { mode: failure } };
		}
		return null;
	};

	const page = (method: string, url: URL): Answer | null => {
		if (method !== 'GET') return null;
		const html = { 'Content-Type': 'text/html; charset=utf-8' };
		if (url.pathname === '/') {
			const to = url.searchParams.get('to')?.toLowerCase() ?? null;
			return { status: 200, headers: html, body: mailListPage(mails, to) };
		}
		const [, id, part] = /^\/mail\/(\d+)(\/html)?$/.exec(url.pathname) ?? [];
		const mail = mails.find((kept) => kept.id === id);
		if (!mail) return null;
		if (!part) return { status: 200, headers: html, body: mailPage(mail) };
		// A mail's own markup runs no script and loads nothing.
		const policy = "sandbox; default-src 'none'; style-src 'unsafe-inline'; img-src data:";
		return {
			status: 200,
			headers: { ...html, 'Content-Security-Policy': policy },
			body: mail.html ?? ''
		};
	};

	const web = await serveLoopback(async (request, url) => {
		const method = request.method ?? 'GET';
		return (
			(await api(method, url, () => readJson(request))) ??
			page(method, url) ?? { status: 404, json: { error: 'Nothing here' } }
		);
	}, ports.http);

	return {
		smtpUrl: `smtp://127.0.0.1:${smtpPort}`,
		url: web.origin,
		close: async () => {
			await web.close();
			await new Promise<void>((resolve) => smtp.close(resolve));
		}
	};
}

function smtpError(responseCode: number, message: string): Error {
	return Object.assign(new Error(message), { responseCode });
}

if (isMain(import.meta.url)) {
	const mailbox = await startMailbox({
		smtp: portFrom('DUSKLINE_SMTP_PORT'),
		http: portFrom('DUSKLINE_MAILBOX_PORT')
	});
	closeOnSignal(mailbox.close);
	console.log(`Mailbox: ${mailbox.url}, taking mail at ${mailbox.smtpUrl}`);
}
