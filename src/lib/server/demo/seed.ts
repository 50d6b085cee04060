import { chmodSync, readFileSync, writeFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';
import { searchedRegion } from '../../sky/catch/searchedRegion';
import { logBayesFactor, logBayesOfJoining } from '../../sky/regions/agreement';
import { jointRegion } from '../../sky/regions/jointRegion';
import type { App } from '../app';
import { parseConfig } from '../config';
import { connectDatabase } from '../db/database';
import { bossQueue, createBoss } from '../jobs/queue';
import { prepareQueues } from '../jobs/runWorkers';
import { seedDemo } from './seedDemo';

/** What the seed needs none of: it sends no mail and signs nobody in. */
const UNUSED = {
	ORIGIN: 'http://127.0.0.1',
	AUTH_SECRET: 'the seed signs nobody in, so this is no secret',
	SMTP_URL: 'smtp://127.0.0.1'
};

/** Seeds the database named by DATABASE_URL; stream keys go to the file named by DUSKLINE_DEMO_KEYS_FILE. */
const leftToWorkers = () => Promise.reject(new Error('the seed leaves it to the workers'));

async function main(): Promise<void> {
	const config = parseConfig({ ...UNUSED, ...process.env });
	const keysFile = process.env.DUSKLINE_DEMO_KEYS_FILE;
	const { database, pool, close } = connectDatabase(config.databaseUrl);
	const boss = createBoss(config.databaseUrl);
	try {
		await boss.start();
		await prepareQueues(boss);
		const app: App = {
			config,
			database,
			pool,
			queue: bossQueue(boss),
			compute: {
				jointRegion: async (parts) => jointRegion(parts),
				outline: leftToWorkers,
				logBayesFactor: async (parts) => logBayesFactor(parts),
				logBayesOfJoining: async ({ parts, shape }) => logBayesOfJoining(parts, shape),
				mapShape: () => Promise.reject(new Error('the demo has no maps')),
				fileShape: () => Promise.reject(new Error('the demo has no files')),
				regionFile: leftToWorkers,
				searchedRegion: async ({ shapes, reports, t0Ms, fade }) =>
					searchedRegion(shapes, reports, t0Ms, fade),
				outlook: leftToWorkers,
				outlookText: leftToWorkers,
				close: async () => {}
			},
			files: null,
			now: () => new Date()
		};
		const { made, transients, keys, happening } = await seedDemo(app, readKeys(keysFile));
		if (keys && keysFile) {
			writeFileSync(keysFile, `${JSON.stringify({ streams: keys, happening }, null, 2)}\n`, {
				mode: 0o600
			});
			// The mode above holds for a new file only.
			chmodSync(keysFile, 0o600);
		}
		console.log(
			made
				? `Seeded the demo: ${transients + 1} transients over 90 days, one of them happening now.`
				: `The demo is seeded already${keys ? '; its streams have new keys' : ''}.`
		);
	} finally {
		await boss.stop({ graceful: false });
		await close();
	}
}

function readKeys(keysFile: string | undefined): Record<string, string> | null {
	if (!keysFile) return null;
	try {
		const { streams } = JSON.parse(readFileSync(keysFile, 'utf8')) as { streams?: unknown };
		return typeof streams === 'object' ? (streams as Record<string, string> | null) : null;
	} catch {
		// Missing or cut short: new keys are made and written.
		return null;
	}
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
	await main();
}
