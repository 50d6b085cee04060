import { z } from 'zod';

const onOff = z.enum(['on', 'off']).transform((value) => value === 'on');

const environmentSchema = z
	.object({
		DATABASE_URL: z
			.url({ protocol: /^postgres(ql)?$/, error: 'must be a postgres:// address' })
			.describe('PostgreSQL 15 to work on'),
		ORIGIN: z
			.url({ protocol: /^https?$/, error: 'must be an http(s) address without a path' })
			.transform((value) => new URL(value).origin),
		AUTH_SECRET: z.string().min(32, 'must be at least 32 characters'),
		SMTP_URL: z.url({ protocol: /^smtps?$/, error: 'must be an smtp:// or smtps:// address' }),
		MAIL_FROM: z.string().min(3).default('Duskline <duskline@localhost>'),
		DUSKLINE_ROLE: z.enum(['web', 'worker', 'all']).default('all'),
		DUSKLINE_DEMO: onOff.default(false),
		DUSKLINE_MAILBOX_URL: z.url().optional(),
		DUSKLINE_DEMO_BROKER: z
			.string()
			.regex(/^[A-Za-z0-9.-]+:\d{1,5}$/, 'must be host:port')
			.transform((text) => {
				const [host, port] = text.split(':') as [string, string];
				return { host, port: Number(port) };
			})
			.refine(({ port }) => port >= 1 && port <= 65_535, 'must be host:port')
			.optional(),
		DUSKLINE_COMPUTE_THREADS: z.coerce.number().int().min(1).max(16).default(1),
		DATABASE_POOL_MAX: z.coerce.number().int().min(2).max(100).default(12),
		VAPID_PUBLIC_KEY: z.string().min(1).optional(),
		VAPID_PRIVATE_KEY: z.string().min(1).optional(),
		VAPID_SUBJECT: z
			.string()
			.regex(/^(mailto:|https:)/, 'must be a mailto: or https: address')
			.optional(),
		STORAGE_URL: z
			.url({ protocol: /^https?$/, error: 'must be the http(s) address of an S3 service' })
			.optional(),
		STORAGE_BUCKET: z
			.string()
			.regex(/^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/, 'must be a bucket’s name: lower case, 3 to 63')
			.optional(),
		STORAGE_ACCESS_KEY: z.string().min(1).optional(),
		STORAGE_SECRET_KEY: z.string().min(1).optional(),
		STORAGE_REGION: z.string().min(1).default('us-east-1'),
		LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'silent']).default('info')
	})
	.superRefine((env, context) => {
		const hostname = new URL(env.ORIGIN).hostname;
		if (env.DUSKLINE_DEMO && !['127.0.0.1', 'localhost', '[::1]'].includes(hostname)) {
			context.addIssue({
				code: 'custom',
				path: ['DUSKLINE_DEMO'],
				message: `must be off when ORIGIN (${env.ORIGIN}) is not a loopback address: the demo signs anybody in`
			});
		}
		const vapid = [env.VAPID_PUBLIC_KEY, env.VAPID_PRIVATE_KEY, env.VAPID_SUBJECT];
		if (vapid.some(Boolean) && !vapid.every(Boolean)) {
			context.addIssue({
				code: 'custom',
				path: ['VAPID_PUBLIC_KEY'],
				message: 'VAPID_PUBLIC_KEY, VAPID_PRIVATE_KEY and VAPID_SUBJECT go together'
			});
		}
		const names = [
			'STORAGE_URL',
			'STORAGE_BUCKET',
			'STORAGE_ACCESS_KEY',
			'STORAGE_SECRET_KEY'
		] as const;
		const missing = names.filter((name) => !env[name]);
		if (missing.length > 0 && missing.length < names.length) {
			context.addIssue({
				code: 'custom',
				path: ['STORAGE_URL'],
				message: `needs ${missing.join(', ')} too: ${names.join(', ')} go together`
			});
		}
	});

export type Config = {
	databaseUrl: string;
	databasePoolMax: number;
	origin: string;
	authSecret: string;
	smtpUrl: string;
	mailFrom: string;
	role: 'web' | 'worker' | 'all';
	/** One-click sign-in of the seeded people; loopback only. */
	demo: boolean;
	/** Where the demo's mailbox can be read; shown on the sign-in page. */
	mailboxUrl: string | null;
	/** The VOEvent broker that the demo's seed subscribes one stream to. */
	demoBroker: { host: string; port: number } | null;
	computeThreads: number;
	vapid: { publicKey: string; privateKey: string; subject: string } | null;
	/** Object storage by the S3 API, for files that come with packets; null: such packets are refused. */
	storage: {
		url: string;
		bucket: string;
		accessKey: string;
		secretKey: string;
		region: string;
	} | null;
	logLevel: string;
};

/** Thrown when the environment can't be used; the message names every variable that is wrong. */
export class ConfigError extends Error {
	override name = 'ConfigError';
}

/** Parses the environment, or throws a ConfigError that names each variable and what it must be. */
export function parseConfig(environment: Record<string, string | undefined>): Config {
	const present = Object.fromEntries(
		Object.entries(environment).filter(([, value]) => value !== undefined && value !== '')
	);
	const parsed = environmentSchema.safeParse(present);
	if (!parsed.success) {
		const lines = parsed.error.issues.map((issue) =>
			present[String(issue.path[0])] === undefined
				? `  ${String(issue.path[0])} is not set`
				: `  ${String(issue.path[0])} ${issue.message}`
		);
		throw new ConfigError(`Duskline can't start with this environment:\n${lines.join('\n')}`);
	}
	const env = parsed.data;
	return {
		databaseUrl: env.DATABASE_URL,
		databasePoolMax: env.DATABASE_POOL_MAX,
		origin: env.ORIGIN,
		authSecret: env.AUTH_SECRET,
		smtpUrl: env.SMTP_URL,
		mailFrom: env.MAIL_FROM,
		role: env.DUSKLINE_ROLE,
		demo: env.DUSKLINE_DEMO,
		mailboxUrl: env.DUSKLINE_MAILBOX_URL ?? null,
		demoBroker: env.DUSKLINE_DEMO_BROKER ?? null,
		computeThreads: env.DUSKLINE_COMPUTE_THREADS,
		vapid:
			env.VAPID_PUBLIC_KEY && env.VAPID_PRIVATE_KEY && env.VAPID_SUBJECT
				? {
						publicKey: env.VAPID_PUBLIC_KEY,
						privateKey: env.VAPID_PRIVATE_KEY,
						subject: env.VAPID_SUBJECT
					}
				: null,
		storage:
			env.STORAGE_URL && env.STORAGE_BUCKET && env.STORAGE_ACCESS_KEY && env.STORAGE_SECRET_KEY
				? {
						url: env.STORAGE_URL,
						bucket: env.STORAGE_BUCKET,
						accessKey: env.STORAGE_ACCESS_KEY,
						secretKey: env.STORAGE_SECRET_KEY,
						region: env.STORAGE_REGION
					}
				: null,
		logLevel: env.LOG_LEVEL
	};
}

let current: Config | undefined;

/** The process's configuration, parsed from `process.env` on first use. */
export function config(): Config {
	current ??= parseConfig(process.env);
	return current;
}
