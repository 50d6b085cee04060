import type { TestProject } from 'vitest/node';
import { migrateDatabase } from '../../src/lib/server/db/migrate';
import { startCluster } from './cluster';
import { administer, type TestCluster } from './templateDatabase';

declare module 'vitest' {
	interface ProvidedContext {
		testCluster: TestCluster;
	}
}

const TEMPLATE = 'duskline_template';

/** One cluster for the run, with the migrations applied once to the database the tests copy. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
	const cluster = await startCluster();
	try {
		const adminUrl = cluster.urlOf('postgres');
		await administer(adminUrl, `CREATE DATABASE "${TEMPLATE}"`);
		await migrateDatabase(cluster.urlOf(TEMPLATE));
		project.provide('testCluster', { adminUrl, template: TEMPLATE });
	} catch (error) {
		await cluster.stop();
		throw error;
	}
	return () => cluster.stop();
}
