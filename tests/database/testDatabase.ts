import { inject } from 'vitest';
import { copyTemplate, type TestDatabase } from './templateDatabase';

export type { TestDatabase };

/**
 * A migrated, empty database of a test file's own: create it in `beforeAll`, close every pool on it
 * and `drop()` it in `afterAll`.
 */
export function createTestDatabase(): Promise<TestDatabase> {
	return copyTemplate(inject('testCluster'));
}
