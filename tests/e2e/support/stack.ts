import { execFileSync, spawn, type ChildProcess } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import {
	createWriteStream,
	existsSync,
	mkdirSync,
	mkdtempSync,
	readFileSync,
	rmSync
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import webPush from 'web-push';
import { startMailbox } from '../../../fakes/mailbox';
import { startObjectStore } from '../../../fakes/objectStore';
import { startPushService } from '../../../fakes/pushService';
import { startVoeventBroker } from '../../../fakes/voeventBroker';
import { freePort, startCluster } from '../../database/cluster';
import { administer } from '../../database/templateDatabase';
import type { StackAddresses } from './addresses';

export type Stack = {
	addresses: StackAddresses;
	/** Of the application, for measuring its memory. */
	applicationPid: number;
	stop: () => Promise<void>;
};

const START_TIMEOUT_MS = 60_000;
const STOP_TIMEOUT_MS = 10_000;
const LOG_FILE = 'test-results/application.log';

/**
 * Starts what the browser tests run against: a database with the demo's seed, the fakes and the built
 * application, all on free loopback ports and ended by `stop()`.
 */
export async function startStack(options: { durable?: boolean } = {}): Promise<Stack> {
	if (!existsSync('build/index.js') || !existsSync('build-workers/compute.js')) {
		throw new Error('There is no build: run `npm run build` first');
	}
	const directory = mkdtempSync(join(tmpdir(), 'duskline-e2e-'));
	const removeDirectory = () => rmSync(directory, { recursive: true, force: true });
	// A run ended by a signal gets no tear-down.
	process.once('exit', removeDirectory);
	const stops: (() => Promise<void> | void)[] = [removeDirectory];
	const stop = async () => {
		for (const step of stops.reverse()) await step();
	};
	try {
		const cluster = await startCluster(options);
		stops.push(cluster.stop);
		await administer(cluster.urlOf('postgres'), 'CREATE DATABASE duskline');
		const mailbox = await startMailbox({ smtp: 0, http: 0 });
		stops.push(mailbox.close);
		const push = await startPushService({ pushPort: 0, httpPort: 0, stateDirectory: directory });
		stops.push(push.close);
		const keys = {
			bucket: 'duskline',
			accessKey: 'duskline',
			secretKey: randomBytes(16).toString('hex')
		};
		const storage = await startObjectStore({
			port: 0,
			stateDirectory: join(directory, 'storage'),
			...keys
		});
		stops.push(storage.close);
		const broker = await startVoeventBroker({ vtpPort: 0, httpPort: 0 });
		stops.push(broker.close);

		const port = await freePort();
		const keysFile = join(directory, 'demo-keys.json');
		const environment = environmentOf({
			port,
			databaseUrl: cluster.urlOf('duskline'),
			keysFile,
			smtpUrl: mailbox.smtpUrl,
			mailboxUrl: mailbox.url,
			certificatePath: push.certificatePath,
			storage: { url: storage.url, ...keys },
			brokerPort: broker.port
		});
		for (const script of ['src/lib/server/db/migrate.ts', 'src/lib/server/demo/seed.ts']) {
			execFileSync('node', ['--import', 'tsx', script], { env: environment, stdio: 'inherit' });
		}
		const application = await startApplication(port, environment);
		stops.push(() => end(application));

		const { streams } = JSON.parse(readFileSync(keysFile, 'utf8')) as {
			streams: StackAddresses['streamKeys'];
		};
		return {
			addresses: {
				origin: `http://127.0.0.1:${port}`,
				mailboxUrl: mailbox.url,
				pushUrl: push.url,
				brokerUrl: broker.url,
				databaseUrl: cluster.urlOf('duskline'),
				streamKeys: streams
			},
			applicationPid: application.pid!,
			stop
		};
	} catch (error) {
		await stop();
		throw error;
	}
}

function environmentOf(parts: {
	port: number;
	databaseUrl: string;
	keysFile: string;
	smtpUrl: string;
	mailboxUrl: string;
	certificatePath: string;
	storage: { url: string; bucket: string; accessKey: string; secretKey: string };
	brokerPort: number;
}): NodeJS.ProcessEnv {
	const vapid = webPush.generateVAPIDKeys();
	return {
		PATH: process.env.PATH,
		HOME: process.env.HOME,
		NODE_ENV: 'production',
		DATABASE_URL: parts.databaseUrl,
		ORIGIN: `http://127.0.0.1:${parts.port}`,
		HOST: '127.0.0.1',
		PORT: String(parts.port),
		BODY_SIZE_LIMIT: '66M',
		AUTH_SECRET: randomBytes(32).toString('hex'),
		SMTP_URL: parts.smtpUrl,
		VAPID_PUBLIC_KEY: vapid.publicKey,
		VAPID_PRIVATE_KEY: vapid.privateKey,
		VAPID_SUBJECT: 'mailto:duty@duskline.example',
		STORAGE_URL: parts.storage.url,
		STORAGE_BUCKET: parts.storage.bucket,
		STORAGE_ACCESS_KEY: parts.storage.accessKey,
		STORAGE_SECRET_KEY: parts.storage.secretKey,
		NODE_EXTRA_CA_CERTS: parts.certificatePath,
		DUSKLINE_DEMO: 'on',
		DUSKLINE_DEMO_KEYS_FILE: parts.keysFile,
		DUSKLINE_MAILBOX_URL: parts.mailboxUrl,
		DUSKLINE_DEMO_BROKER: `127.0.0.1:${parts.brokerPort}`
	};
}

async function startApplication(
	port: number,
	environment: NodeJS.ProcessEnv
): Promise<ChildProcess> {
	mkdirSync('test-results', { recursive: true });
	const log = createWriteStream(LOG_FILE);
	// Ended by the kernel too, should the test runner be killed outright.
	const child = spawn('setpriv', ['--pdeathsig', 'TERM', '--', 'node', 'build'], {
		env: environment,
		stdio: ['ignore', 'pipe', 'pipe']
	});
	child.stdout.pipe(log, { end: false });
	child.stderr.pipe(log, { end: false });
	const deadlineMs = Date.now() + START_TIMEOUT_MS;
	while (Date.now() < deadlineMs && child.exitCode === null) {
		const response = await fetch(`http://127.0.0.1:${port}/healthz`).catch(() => null);
		if (response?.ok) return child;
		await delay(100);
	}
	await end(child);
	throw new Error(`The application did not start:\n${readFileSync(LOG_FILE, 'utf8').slice(-4000)}`);
}

async function end(child: ChildProcess): Promise<void> {
	if (child.exitCode !== null || child.signalCode !== null) return;
	const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
	child.kill('SIGTERM');
	const timer = setTimeout(() => child.kill('SIGKILL'), STOP_TIMEOUT_MS);
	await ended;
	clearTimeout(timer);
}
