import type PgBoss from 'pg-boss';
import pg from 'pg';
import type { App } from '../app';
import { logger } from '../logger';
import { ALL_JOBS } from './allJobs';
import { JOB_CHANNEL, type Job } from './queue';

/** Starts a worker for every kind of job and wakes them as soon as work is announced. */
export async function runWorkers(app: App, boss: PgBoss): Promise<() => Promise<void>> {
	const workers = new Map<string, string[]>();
	for (const job of ALL_JOBS) workers.set(job.name, await startWorkers(app, boss, job));
	const stopListening = await listenForJobs(app, (name) => {
		for (const id of workers.get(name) ?? []) boss.notifyWorker(id);
	});
	return stopListening;
}

/** Makes the queues and schedules; safe to repeat in every process. */
export async function prepareQueues(boss: PgBoss): Promise<void> {
	for (const job of ALL_JOBS) {
		const name = job.name;
		if (!(await boss.getQueue(name))) {
			// `short`: at most one waiting job per singleton key, however many run.
			await boss.createQueue(name, { name, policy: job.coalesce ? 'short' : 'standard' });
		}
		if (job.schedule) await boss.schedule(name, job.schedule.cron, job.schedule.payload as object);
	}
}

async function startWorkers<Payload>(app: App, boss: PgBoss, job: Job<Payload>): Promise<string[]> {
	const ids: string[] = [];
	for (let index = 0; index < job.concurrency; index++) {
		const id = await boss.work(
			job.name,
			{ pollingIntervalSeconds: 2, batchSize: 1 },
			async ([item]: PgBoss.Job<unknown>[]) => {
				if (!item) return;
				try {
					await job.handle(app, job.payload.parse(item.data));
				} catch (error) {
					logger.warn({ job: job.name, error: (error as Error).message }, 'job failed');
					throw error;
				}
			}
		);
		ids.push(id);
	}
	return ids;
}

async function listenForJobs(
	app: App,
	heard: (name: string) => void
): Promise<() => Promise<void>> {
	const client = new pg.Client({ connectionString: app.config.databaseUrl });
	client.on('notification', (message) => heard(message.payload ?? ''));
	// Polling goes on without it; the process must not end because the wire was cut.
	client.on('error', (error) => logger.warn({ error: error.message }, 'job listener lost'));
	await client.connect();
	await client.query(`listen ${JOB_CHANNEL}`);
	return () => client.end();
}
