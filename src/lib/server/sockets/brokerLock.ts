import { sql, type SQL, type SQLWrapper } from 'drizzle-orm';
import { drizzle } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { schema, type Database } from '../db/database';

/** The right to hold a broker's socket: one process at a time, on a database connection of its own. */
export type BrokerLock = {
	/** The lock's own connection: who has lost the lock can write nothing through it. */
	database: Database;
	/** Aborted when the connection is gone, and the lock with it. */
	lost: AbortSignal;
	/** Asks the database whether the connection still stands; loses the lock when it does not answer. */
	verify: () => Promise<void>;
	release: () => Promise<void>;
};

const ANSWER_WITHIN_MS = 10_000;

/** The number by which PostgreSQL knows the lock of a broker. */
const lockKey = (id: SQLWrapper | string): SQL =>
	sql`hashtextextended('stream_broker ' || ${id}::text, 0)`;

/** Whether some process holds the broker's socket. */
export const isHeld = (id: SQLWrapper | string): SQL<boolean> =>
	sql<boolean>`exists (select 1 from pg_locks
		where locktype = 'advisory' and objsubid = 1 and granted
			and database = (select oid from pg_database where datname = current_database())
			and (classid::bigint << 32) | objid::bigint = ${lockKey(id)})`;

/** Takes the lock; null when another process has it. */
export async function takeBrokerLock(
	databaseUrl: string,
	brokerId: string
): Promise<BrokerLock | null> {
	const client = new pg.Client({
		connectionString: databaseUrl,
		connectionTimeoutMillis: ANSWER_WITHIN_MS,
		query_timeout: ANSWER_WITHIN_MS,
		keepAlive: true,
		application_name: 'duskline socket'
	});
	const lost = new AbortController();
	client.on('error', () => lost.abort());
	client.on('end', () => lost.abort());
	const end = async () => {
		lost.abort();
		await client.end().catch(() => undefined);
	};
	try {
		await client.connect();
		const database: Database = drizzle(client, { schema });
		const { rows } = await database.execute<{ held: boolean }>(
			sql`select pg_try_advisory_lock(${lockKey(brokerId)}) as held`
		);
		if (rows[0]?.held) {
			const verify = () => client.query('select 1').then(() => undefined, end);
			return { database, lost: lost.signal, verify, release: end };
		}
	} catch (error) {
		await end();
		throw error;
	}
	await end();
	return null;
}
