import { isActionFailure, isHttpError, isRedirect } from '@sveltejs/kit';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PERMISSIONS } from '../../src/lib/domain/permissions';
import { ROLES, type Role } from '../../src/lib/domain/vocabulary';
import type { Actor } from '../../src/lib/server/actor';
import { openWorld, type World } from '../database/world';
import { routeEvent } from '../http/callRoute';
import { ROUTE_GUARDS } from './routePermissions';

type Entry = (event: never) => unknown;
type RouteModule = Record<string, unknown> & { actions?: Record<string, Entry> };

const modules = import.meta.glob<RouteModule>([
	'/src/routes/**/+page.server.ts',
	'/src/routes/**/+layout.server.ts',
	'/src/routes/**/+server.ts'
]);
const METHODS = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'fallback'];

let world: World;
const entries = new Map<string, { method: string; call: Entry }>();
const actors = new Map<Role, Actor>();

for (const [file, load] of Object.entries(modules)) {
	const module = await load();
	const name = file.replace('/src/routes', '');
	const add = (entry: string, method: string, call: unknown) =>
		entries.set(`${name} › ${entry}`, { method, call: call as Entry });
	if (module.load) add('load', 'GET', module.load);
	for (const [action, call] of Object.entries(module.actions ?? {})) {
		add(`action ${action}`, 'POST', call);
	}
	for (const method of METHODS) if (module[method]) add(method, method, module[method]);
}

beforeAll(async () => {
	world = await openWorld();
	for (const role of ROLES) actors.set(role, await world.person(role));
});
afterAll(() => world.close());

/** The status with which an entry refuses: 401 for sign in first, 403 for not allowed; null when it went on. */
async function refusalOf(key: string, actor: Actor | null): Promise<number | null> {
	const { method, call } = entries.get(key)!;
	const [file] = key.split(' › ') as [string];
	const isApi = file.endsWith('+server.ts');
	const writes = method !== 'GET' && method !== 'HEAD';
	const event = routeEvent(world.app, {
		method: method === 'fallback' ? 'GET' : method,
		path: '/here',
		actor,
		headers: writes
			? { 'content-type': isApi ? 'application/json' : 'application/x-www-form-urlencoded' }
			: {},
		body: writes ? (isApi ? '{}' : 'a=b') : undefined,
		params: Object.fromEntries(
			[...file.matchAll(/\[+(?:\.\.\.)?(\w+)(?:=\w+)?\]+/g)].map((match) => [
				match[1]!,
				paramFor(match[1]!)
			])
		)
	});
	try {
		const result = await call(event as never);
		if (result instanceof Response) return isRefusal(result.status);
		if (isActionFailure(result)) return isRefusal(result.status);
		return null;
	} catch (thrown) {
		if (isRedirect(thrown)) return thrown.location.startsWith('/auth/sign-in?to=') ? 401 : null;
		if (isHttpError(thrown)) return isRefusal(thrown.status);
		throw thrown;
	}
}

const isRefusal = (status: number) => (status === 401 || status === 403 ? status : null);

function paramFor(name: string): string {
	if (name === 'designation') return 'D26L01-a';
	if (name === 'id' || name.endsWith('Id')) return '00000000-0000-4000-8000-000000000000';
	if (name === 'code') return 'ALM';
	return '1';
}

describe('every load, action and handler', () => {
	it('is on the list of guards, and the list names nothing else', () => {
		expect([...entries.keys()].sort()).toEqual(Object.keys(ROUTE_GUARDS).sort());
	});

	const guarded = [...entries.keys()].filter((key) => ROUTE_GUARDS[key] !== 'public');

	it.each(guarded)('%s sends away who is not signed in', async (key) => {
		expect(await refusalOf(key, null)).toBe(401);
	});

	const byPermission = guarded.filter(
		(key) => ROUTE_GUARDS[key] !== 'key' && ROUTE_GUARDS[key] !== 'signedIn'
	);
	it.each(byPermission)('%s refuses every role without the permission', async (key) => {
		const allowed: readonly Role[] = PERMISSIONS[ROUTE_GUARDS[key] as keyof typeof PERMISSIONS];
		for (const role of ROLES) {
			const status = await refusalOf(key, actors.get(role)!);
			if (!allowed.includes(role)) expect({ role, status }).toEqual({ role, status: 403 });
		}
	});
});
