import { describe, expect, it } from 'vitest';
import { OPERATIONS } from '../../src/lib/server/apiDescription/operations';
import { ROUTE_GUARDS } from './routePermissions';

const modules = import.meta.glob<Record<string, unknown>>('/src/routes/api/v1/**/+server.ts');
const METHODS = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS'];

const handlers = new Map<string, string>();
for (const [file, load] of Object.entries(modules)) {
	const module = await load();
	const path = file
		.replace('/src/routes/api/v1', '')
		.replace('/+server.ts', '')
		.replace(/\[(\w+)(=\w+)?\]/g, '{$1}');
	for (const method of METHODS) {
		if (module[method]) {
			handlers.set(`${method} ${path}`, `${file.replace('/src/routes', '')} › ${method}`);
		}
	}
}
const described = new Map(OPERATIONS.map((item) => [`${item.method} ${item.path}`, item]));

describe('the description of the API', () => {
	it('has every handler under /api/v1', () => {
		expect([...handlers.keys()].filter((key) => !described.has(key))).toEqual([]);
	});

	it('has nothing that is not there', () => {
		const missing = [...described.keys()].filter((key) => !handlers.has(key));
		expect(missing).toEqual([]);
	});

	it.each([...handlers])('says of %s who may, as the guard has it', (key, guarded) => {
		expect(described.get(key)?.guard).toBe(ROUTE_GUARDS[guarded]);
	});
});
