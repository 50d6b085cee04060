import type pg from 'pg';
import type { Config } from './config';
import type { Database } from './db/database';
import type { ComputePool } from './outlook/computePool';
import type { Queue } from './jobs/queue';
import type { ObjectStore } from './storage/objectStore';

/** What a use case works with: passed in, so that tests bring their own database and clock. */
export type App = {
	config: Config;
	database: Database;
	pool: pg.Pool;
	queue: Queue;
	compute: ComputePool;
	/** Files that came with packets; null where no storage is configured. */
	files: ObjectStore | null;
	now: () => Date;
};
