import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { packet, streamKey } from '../../src/lib/server/db/schema/alerts';
import { limitKey } from '../../src/lib/server/packets/keyRateLimit';
import { makeStreamKey } from '../../src/lib/server/streams/streamKeyService';
import { POST } from '../../src/routes/api/v1/alerts/+server';
import { circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let streamId: string;

beforeAll(async () => {
	world = await openWorld();
	({ streamId } = await world.stream('tambour', 'gamma'));
});
afterAll(() => world.close());

async function newKey(): Promise<{ id: string; key: string }> {
	const { key, prefix, hash } = makeStreamKey('tambour');
	const [row] = await world.app.database
		.insert(streamKey)
		.values({ streamId, label: 'test', prefix, hash })
		.returning();
	return { id: row!.id, key };
}

async function post(key: string, packetId: string): Promise<Response> {
	const event = routeEvent(world.app, {
		method: 'POST',
		path: '/api/v1/alerts',
		headers: { authorization: `Bearer ${key}`, 'content-type': 'application/json' },
		body: JSON.stringify(circlePacket({ packetId }))
	});
	return POST(event as unknown as Parameters<typeof POST>[0]);
}

/** As if the key had sent until it was told to wait. */
async function exhaust(keyId: string): Promise<number> {
	for (let sent = 0; sent < 100_000; sent++) {
		try {
			await limitKey(keyId);
		} catch {
			return sent;
		}
	}
	throw new Error('it may send without end');
}

it('a key that sends too fast is told with 429 how long to wait; nothing is kept, other keys go on', async () => {
	const fast = await newKey();
	const calm = await newKey();
	expect((await post(fast.key, 'TB-1')).status).toBe(201);
	expect(await exhaust(fast.id)).toBeGreaterThan(1000);

	const refused = await post(fast.key, 'TB-2');
	expect(refused.status).toBe(429);
	expect(refused.headers.get('content-type')).toBe('application/problem+json');
	const waitS = Number(refused.headers.get('retry-after'));
	expect(waitS).toBeGreaterThanOrEqual(1);
	expect(waitS).toBeLessThanOrEqual(10);
	expect(await refused.json()).toMatchObject({
		type: 'urn:duskline:problem:tooManyRequests',
		retryAfterS: waitS
	});
	expect(await world.app.database.$count(packet, eq(packet.keyId, fast.id))).toBe(1);

	expect((await post(calm.key, 'TB-3')).status).toBe(201);
});
