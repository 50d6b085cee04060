import { isHttpError } from '@sveltejs/kit';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/actor';
import { session } from '../../src/lib/server/db/schema/people';
import { actions, load } from '../../src/routes/auth/demo/+page.server';
import { openWorld, type World } from '../database/world';
import { routeEvent } from '../http/callRoute';

let world: World;
let duty: Actor;

beforeAll(async () => {
	world = await openWorld();
	duty = await world.person('duty');
});
afterAll(() => world.close());

async function statusOf(call: () => unknown): Promise<number> {
	try {
		await call();
		return 200;
	} catch (thrown) {
		if (isHttpError(thrown)) return thrown.status;
		throw thrown;
	}
}

it('one-click sign-in is not there while the demo switch is off', async () => {
	expect(world.app.config.demo).toBe(false);
	const event = () =>
		routeEvent(world.app, {
			method: 'POST',
			path: '/auth/demo',
			headers: { 'content-type': 'application/x-www-form-urlencoded' },
			body: `person=${duty.id}`
		});
	expect(await statusOf(() => load(event() as never))).toBe(404);
	expect(await statusOf(() => actions.default!(event() as never))).toBe(404);
	expect(await world.app.database.$count(session)).toBe(0);
});

it('with the switch on it signs in seeded people only', async () => {
	const app = { ...world.app, config: { ...world.app.config, demo: true } };
	const event = routeEvent(app, {
		method: 'POST',
		path: '/auth/demo',
		headers: { 'content-type': 'application/x-www-form-urlencoded' },
		body: `person=${duty.id}`
	});
	expect(await statusOf(() => actions.default!(event as never))).toBe(404);
	expect(await world.app.database.$count(session)).toBe(0);
});
