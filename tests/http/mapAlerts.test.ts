import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { alert, streamKey } from '../../src/lib/server/db/schema/alerts';
import { makeStreamKey } from '../../src/lib/server/streams/streamKeyService';
import { POST } from '../../src/routes/api/v1/alerts/+server';
import { circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let key: string;
let count = 0;

beforeAll(async () => {
	world = await openWorld();
	const { streamId } = await world.stream('tambour', 'gamma');
	const made = makeStreamKey('tambour');
	key = made.key;
	await world.app.database
		.insert(streamKey)
		.values({ streamId, label: 'test', prefix: made.prefix, hash: made.hash });
});
afterAll(() => world.close());

async function post(shape: Record<string, unknown>, packetId = `map-${++count}`) {
	const t0 = `2026-11-${String(count).padStart(2, '0')}T03:00:00Z`;
	const event = routeEvent(world.app, {
		method: 'POST',
		path: '/api/v1/alerts',
		headers: { authorization: `Bearer ${key}`, 'content-type': 'application/json' },
		body: JSON.stringify(circlePacket({ packetId, t0, shape: { kind: 'map', ...shape } }))
	});
	const response = await POST(event as unknown as Parameters<typeof POST>[0]);
	return {
		status: response.status,
		type: response.headers.get('content-type'),
		body: (await response.json()) as { alertId: string; errors: { pointer: string }[] }
	};
}

async function storedShape(alertId: string) {
	const [row] = await world.app.database
		.select({ shape: alert.shape })
		.from(alert)
		.where(eq(alert.id, alertId));
	return row!.shape;
}

const twelve = (pixel: number) => Array.from({ length: 12 }, (_, i) => (i === pixel ? 1 : 0));

describe('a map sent to POST /api/v1/alerts', () => {
	it('is stored as UNIQ, NESTED, ICRS, whatever it came as', async () => {
		const density = [Number((3 / Math.PI).toPrecision(7))];
		const normal = { kind: 'map', uniq: [8], density };
		for (const shape of [
			{ uniq: [8], density: [5] },
			{ uniq: [32, 33, 34, 35], density: [2, 2, 2, 2], frame: 'icrs' },
			{ order: 0, ordering: 'nested', frame: 'icrs', density: twelve(4) },
			{ nside: 1, ordering: 'ring', frame: 'icrs', probability: twelve(4) }
		]) {
			const { status, body } = await post(shape);
			expect(status).toBe(201);
			expect(await storedShape(body.alertId)).toEqual(normal);
		}
		const galactic = await post({
			order: 0,
			ordering: 'ring',
			frame: 'galactic',
			density: twelve(4)
		});
		expect(galactic.status).toBe(201);
		expect(await storedShape(galactic.body.alertId)).not.toEqual(normal);
	});

	it('is known again when it comes twice', async () => {
		const shape = { nside: 1, ordering: 'ring', frame: 'galactic', probability: twelve(7) };
		expect((await post(shape, 'twice')).status).toBe(201);
		expect((await post(shape, 'twice')).status).toBe(200);
	});

	const flat = { order: 0, ordering: 'ring', frame: 'icrs' };
	it.each<[string, Record<string, unknown>, string]>([
		['a negative pixel', { ...flat, density: [...twelve(0).slice(1), -1] }, '/shape/density/11'],
		['a pixel in words', { ...flat, density: ['1', ...twelve(0).slice(1)] }, '/shape/density/0'],
		['too few pixels', { ...flat, probability: [1, 2] }, '/shape/probability'],
		['nothing in it', { ...flat, density: twelve(12) }, '/shape/density'],
		['no ordering', { ...flat, ordering: undefined, density: twelve(0) }, '/shape/ordering'],
		['no frame', { ...flat, frame: undefined, density: twelve(0) }, '/shape/frame'],
		['an unknown frame', { ...flat, frame: 'ecliptic', density: twelve(0) }, '/shape/frame'],
		['no order', { ordering: 'ring', frame: 'icrs', density: twelve(0) }, '/shape/order'],
		['nside 3', { ...flat, order: undefined, nside: 3, density: [1] }, '/shape/nside'],
		['uniq and an order', { uniq: [4], density: [1], order: 3 }, '/shape/order'],
		['uniq without density', { uniq: [4] }, '/shape/density'],
		['a cell in another', { uniq: [4, 17], density: [1, 1] }, '/shape/uniq/1'],
		['a number that is no cell', { uniq: [4, 3], density: [1, 1] }, '/shape/uniq/1']
	])('is refused with %s by a problem that names the field', async (_, shape, pointer) => {
		const { status, type, body } = await post(shape, 'wrong');
		expect(status).toBe(422);
		expect(type).toBe('application/problem+json');
		expect(body.errors.map((error) => error.pointer)).toEqual([pointer]);
	});

	it('is refused with a polygon that encloses nothing, too', async () => {
		const vertices = [0, 1, 2].map((raDeg) => ({ raDeg, decDeg: 0 }));
		const { status, body } = await post({ kind: 'polygon', vertices }, 'flat');
		expect(status).toBe(422);
		expect(body.errors[0]?.pointer).toBe('/shape');
	});
});
