import type pg from 'pg';
import type { Config } from './config';
import type { Database } from './db/database';
import type { ComputePool } from './outlook/computePool';
import type { Queue } from './jobs/queue';

/** What a use case works with: passed in, so that tests bring their own database and clock. */
export type App = {
	config: Config;
	database: Database;
	pool: pg.Pool;
	queue: Queue;
	compute: ComputePool;
	now: () => Date;
};
