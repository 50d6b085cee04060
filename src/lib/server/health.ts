import { sql } from 'drizzle-orm';
import type { App } from './app';
import { logger } from './logger';

/** Whether the database answers. */
export async function isHealthy(app: App): Promise<boolean> {
	try {
		await app.database.execute(sql`select 1`);
		return true;
	} catch (error) {
		logger.warn({ error: (error as Error).message }, 'the database does not answer');
		return false;
	}
}
