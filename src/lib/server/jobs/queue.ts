import PgBoss from 'pg-boss';
import { sql } from 'drizzle-orm';
import type { z } from 'zod';
import type { App } from '../app';
import type { Executor } from '../db/database';
import { logger } from '../logger';

/** Channel on which workers hear of new work, so that they need not wait for their next look. */
export const JOB_CHANNEL = 'duskline_job';

/** One kind of job: what it is called, what it carries and what it does. Handlers are idempotent. */
export type Job<Payload> = {
	name: string;
	payload: z.ZodType<Payload>;
	handle: (app: App, payload: Payload) => Promise<void>;
	/** Tries after the first, with growing pauses. */
	retryLimit: number;
	/** How many run at once in one process. */
	concurrency: number;
	/** At most one waits per singleton key: a second request before it starts is the same request. */
	coalesce?: boolean;
	/** Cron expression, UTC, when it also runs by itself with `scheduledPayload`. */
	schedule?: { cron: string; payload: Payload };
};

export type SendOptions = {
	startAfter?: Date;
	/** For coalescing jobs: what they are about. */
	singletonKey?: string;
};

/** Puts jobs in the queue within the transaction that causes them. */
export type Queue = {
	enqueue: <Payload>(
		tx: Executor,
		job: Job<Payload>,
		payload: Payload,
		options?: SendOptions
	) => Promise<void>;
};

const SCHEMA = 'pgboss';

/** Creates pg-boss on its own small pool; `start` makes its tables and the queues. */
export function createBoss(databaseUrl: string): PgBoss {
	const boss = new PgBoss({
		connectionString: databaseUrl,
		schema: SCHEMA,
		max: 4,
		application_name: 'duskline-jobs',
		archiveCompletedAfterSeconds: 3600,
		deleteAfterDays: 7
	});
	boss.on('error', (error) => logger.warn({ error: error.message }, 'job queue'));
	return boss;
}

/** The queue over pg-boss: the job's row is written on the caller's transaction. */
export function bossQueue(boss: PgBoss): Queue {
	return {
		async enqueue(tx, job, payload, options = {}) {
			const db: PgBoss.Db = {
				executeSql: (text, values) => executeOn(tx, text, values)
			};
			await boss.send(job.name, job.payload.parse(payload) as object, {
				db,
				retryLimit: job.retryLimit,
				retryDelay: 2,
				retryBackoff: true,
				expireInSeconds: 300,
				...(options.startAfter ? { startAfter: options.startAfter } : {}),
				...(options.singletonKey ? { singletonKey: options.singletonKey } : {})
			});
			await tx.execute(sql`select pg_notify(${JOB_CHANNEL}, ${job.name})`);
		}
	};
}

/** Runs a text with $1 … placeholders on a Drizzle executor. */
async function executeOn(
	tx: Executor,
	text: string,
	values: unknown[]
): Promise<{ rows: unknown[] }> {
	const pieces = text.split(/\$(\d+)/);
	const query = sql.empty();
	pieces.forEach((piece, index) => {
		query.append(index % 2 === 0 ? sql.raw(piece) : sql`${sql.param(values[Number(piece) - 1])}`);
	});
	const result = await tx.execute(query);
	return { rows: result.rows };
}
