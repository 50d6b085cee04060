import type PgBoss from 'pg-boss';
import { fillAlertSkyJob } from './alerts/fillAlertSkyJob';
import type { App } from './app';
import { config } from './config';
import { followRevisions } from './db/boardRevisions';
import { connectDatabase } from './db/database';
import { migrateDatabase } from './db/migrate';
import { bossQueue, createBoss } from './jobs/queue';
import { prepareQueues, runWorkers } from './jobs/runWorkers';
import { logger } from './logger';
import { closeMailers } from './notify/mailer';
import { createComputePool } from './outlook/computePool';
import { createObjectStore } from './storage/objectStore';
import { startBrokerSubscriber } from './sockets/brokerSubscriber';

export type Runtime = { app: App; stop: () => Promise<void> };

/**
 * Starts what a process needs: database, queue and compute threads; jobs run and sockets are held
 * here unless the role is `web`. Migrations are applied first, one process at a time.
 */
export async function startRuntime(): Promise<Runtime> {
	const settings = config();
	await migrateDatabase(settings.databaseUrl);
	const connection = connectDatabase(settings.databaseUrl, settings.databasePoolMax);
	const boss = createBoss(settings.databaseUrl);
	await boss.start();
	await prepareQueues(boss);
	const compute = createComputePool(settings.computeThreads);
	const app: App = {
		config: settings,
		database: connection.database,
		pool: connection.pool,
		queue: bossQueue(boss),
		compute,
		files: createObjectStore(settings.storage),
		now: () => new Date()
	};
	// Alerts of earlier versions have no sky of their own yet.
	await app.queue.enqueue(app.database, fillAlertSkyJob, {});
	const stopFollowing = settings.role === 'worker' ? async () => {} : await followRevisions(app);
	const stopWorkers = settings.role === 'web' ? async () => {} : await runWorkers(app, boss);
	const stopSockets = settings.role === 'web' ? async () => {} : startBrokerSubscriber(app);
	logger.info({ role: settings.role, origin: settings.origin }, 'duskline started');
	return {
		app,
		stop: async () => {
			await stopSockets();
			await stopWorkers();
			await stopFollowing();
			await stopBoss(boss);
			closeMailers();
			await compute.close();
			await connection.close();
		}
	};
}

async function stopBoss(boss: PgBoss): Promise<void> {
	await boss.stop({ graceful: true, timeout: 5_000 });
}

/** The process's runtime. On `globalThis`, as the dev server loads this module anew after each edit. */
const holder = globalThis as typeof globalThis & { dusklineRuntime?: Promise<Runtime> };

export async function replaceRuntime(): Promise<Runtime> {
	const old = holder.dusklineRuntime;
	holder.dusklineRuntime = (async () => {
		await (await old?.catch(() => undefined))?.stop();
		return startRuntime();
	})();
	return holder.dusklineRuntime;
}

export async function currentRuntime(): Promise<Runtime> {
	if (!holder.dusklineRuntime) throw new Error('the runtime has not been started');
	return holder.dusklineRuntime;
}
