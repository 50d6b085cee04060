import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

/** Any fixed number: two processes that migrate at once wait for each other on it. */
const MIGRATION_LOCK = 732_018_334;

/** Applies the migrations under `drizzle/` to the database at `url`, one process at a time. */
export async function migrateDatabase(url: string): Promise<void> {
	const client = new pg.Client({ connectionString: url });
	await client.connect();
	try {
		await client.query('select pg_advisory_lock($1)', [MIGRATION_LOCK]);
		await migrate(drizzle(client), { migrationsFolder: resolve('drizzle') });
	} finally {
		await client.end();
	}
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
	const url = process.env.DATABASE_URL;
	if (!url) throw new Error('DATABASE_URL is not set');
	await migrateDatabase(url);
}
