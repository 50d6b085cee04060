import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import * as alerts from './schema/alerts';
import * as circulars from './schema/circulars';
import * as network from './schema/network';
import * as people from './schema/people';
import * as slots from './schema/slots';
import * as transients from './schema/transients';

export const schema = { ...people, ...network, ...alerts, ...transients, ...slots, ...circulars };

export type Database = NodePgDatabase<typeof schema>;
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0];
/** Where a store reads and writes: the pool or an open transaction. */
export type Executor = Database | Transaction;

export type Connection = { database: Database; pool: pg.Pool; close: () => Promise<void> };

/** Opens a pool on `url`; statements that run longer than 30 s are cancelled by the server. */
export function connectDatabase(url: string, poolMax = 12): Connection {
	const pool = new pg.Pool({
		connectionString: url,
		max: poolMax,
		connectionTimeoutMillis: 5_000,
		idleTimeoutMillis: 60_000,
		statement_timeout: 30_000,
		application_name: 'duskline'
	});
	// A connection lost while idle is replaced on next use; without a listener it would end the process.
	pool.on('error', () => {});
	return { database: drizzle(pool, { schema }), pool, close: () => pool.end() };
}

/** PostgreSQL's SQLSTATE and constraint behind an error that Drizzle has wrapped, or null. */
export function databaseErrorOf(error: unknown): { code: string; constraint: string } | null {
	for (let at: unknown = error; at instanceof Error; at = at.cause) {
		const { code, constraint } = at as Error & { code?: unknown; constraint?: unknown };
		if (typeof code === 'string' && /^[0-9A-Z]{5}$/.test(code)) {
			return { code, constraint: typeof constraint === 'string' ? constraint : '' };
		}
	}
	return null;
}
