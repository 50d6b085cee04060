import nodemailer from 'nodemailer';
import type { Config } from '../config';

export type Mail = {
	/** One address. */
	to: string;
	subject: string;
	text: string;
	html?: string;
	headers?: Record<string, string>;
	/** Without angle brackets; the same for every try, so that a receiver can drop a second copy. */
	messageId?: string;
};

export type Mailer = {
	/** Hands one mail to the SMTP server; rejects when the server did not accept it. */
	send: (mail: Mail) => Promise<void>;
	/** Closes idle connections; later sends reject. */
	close: () => void;
};

const TRANSPORT_DEFAULTS: Record<string, string> = {
	pool: 'true',
	maxConnections: '3',
	connectionTimeout: '8000',
	greetingTimeout: '8000',
	socketTimeout: '20000',
	// The pool would send a mail again by itself when the wire breaks after the server took it.
	maxRequeues: '0'
};

/** Opens a pooled SMTP transport on `config.smtpUrl`; options in its query string win. */
export function createMailer(config: Pick<Config, 'smtpUrl' | 'mailFrom'>): Mailer {
	const url = new URL(config.smtpUrl);
	for (const [name, value] of Object.entries(TRANSPORT_DEFAULTS)) {
		if (!url.searchParams.has(name)) url.searchParams.set(name, value);
	}
	const transport = nodemailer.createTransport(url.href);
	let closed = false;
	return {
		async send({ to, subject, text, html, headers, messageId }) {
			// A closed pool would drop the mail without calling back.
			if (closed) throw new Error('The mail transport is closed');
			await transport.sendMail({
				from: config.mailFrom,
				to: { name: '', address: oneLine(to) },
				subject: oneLine(subject),
				text,
				html,
				headers: Object.fromEntries(
					Object.entries(headers ?? {}).map(([name, value]) => [name, oneLine(value)])
				),
				messageId: messageId ? `<${oneLine(messageId)}>` : undefined,
				disableFileAccess: true,
				disableUrlAccess: true
			});
		},
		close() {
			closed = true;
			transport.close();
		}
	};
}

const mailers = new Map<string, Mailer>();

/** The process's mailer for this configuration, opened on first use. */
export function mailer(config: Pick<Config, 'smtpUrl' | 'mailFrom'>): Mailer {
	const key = `${config.smtpUrl}\n${config.mailFrom}`;
	let known = mailers.get(key);
	if (!known) mailers.set(key, (known = createMailer(config)));
	return known;
}

/** Closes every transport that `mailer` opened. */
export function closeMailers(): void {
	for (const known of mailers.values()) known.close();
	mailers.clear();
}

/** Header values stay on one line: a line break in a name or title must not start another header. */
export function oneLine(value: string): string {
	// eslint-disable-next-line no-control-regex
	return value.replace(/[\u0000-\u001f\u007f]+/g, ' ').trim();
}
