import { randomBytes } from 'node:crypto';
import pg from 'pg';

/** What a test file needs to make databases of its own in the run's cluster. */
export type TestCluster = {
	/** A database to connect to for CREATE and DROP DATABASE. */
	adminUrl: string;
	/** Name of the migrated database that each test database is copied from. */
	template: string;
};

export type TestDatabase = { url: string; drop: () => Promise<void> };

/** Runs one statement in the cluster's administrative database. */
export async function administer(adminUrl: string, statement: string): Promise<void> {
	const client = new pg.Client({ connectionString: adminUrl });
	await client.connect();
	try {
		await client.query(statement);
	} finally {
		await client.end();
	}
}

/** Copies the migrated template into a new database; `drop()` ends its connections and removes it. */
export async function copyTemplate({ adminUrl, template }: TestCluster): Promise<TestDatabase> {
	const name = `duskline_${randomBytes(6).toString('hex')}`;
	await administer(adminUrl, `CREATE DATABASE "${name}" TEMPLATE "${template}"`);
	const url = new URL(adminUrl);
	url.pathname = `/${name}`;
	return {
		url: url.href,
		drop: () => administer(adminUrl, `DROP DATABASE IF EXISTS "${name}" WITH (FORCE)`)
	};
}
