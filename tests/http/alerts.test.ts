import { desc } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { packet, alert, streamKey } from '../../src/lib/server/db/schema/alerts';
import { transient } from '../../src/lib/server/db/schema/transients';
import { makeStreamKey } from '../../src/lib/server/streams/streamKeyService';
import { POST } from '../../src/routes/api/v1/alerts/+server';
import { circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let key: string;

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

async function post(
	body: BodyInit,
	headers: Record<string, string> = {}
): Promise<{ status: number; type: string; body: Record<string, unknown> }> {
	const event = routeEvent(world.app, {
		method: 'POST',
		path: '/api/v1/alerts',
		headers: { authorization: `Bearer ${key}`, 'content-type': 'application/json', ...headers },
		body
	});
	const response = await POST(event as unknown as Parameters<typeof POST>[0]);
	return {
		status: response.status,
		type: response.headers.get('content-type') ?? '',
		body: (await response.json()) as Record<string, unknown>
	};
}

const json = (overrides: Record<string, unknown> = {}) => JSON.stringify(circlePacket(overrides));

async function lastPacket() {
	const [row] = await world.app.database.select().from(packet).orderBy(desc(packet.id)).limit(1);
	return row;
}

async function counts() {
	const { database } = world.app;
	return [await database.$count(alert), await database.$count(transient)];
}

describe('POST /api/v1/alerts', () => {
	it('answers 201 for a new packet, 200 with the same body for its copy, 409 for another body', async () => {
		const first = await post(json());
		expect(first.status).toBe(201);
		expect(first.body).toMatchObject({ stream: 'tambour', packetId: 'TB-1', serial: 1 });
		const again = await post(json());
		expect(again.status).toBe(200);
		expect(again.body).toEqual(first.body);
		const other = await post(json({ significance: 3 }));
		expect(other.status).toBe(409);
		expect(other.type).toBe('application/problem+json');
	});

	const shape = {
		kind: 'circle',
		centre: { raDeg: 83, decDeg: -8 },
		radiusDeg: 3,
		containment: 0.9
	};
	const wrong: [name: string, overrides: Record<string, unknown>, pointer: string][] = [
		[
			'a declination past the pole',
			{ shape: { ...shape, centre: { raDeg: 83, decDeg: -91 } } },
			'/shape/centre/decDeg'
		],
		['a radius of nought', { shape: { ...shape, radiusDeg: 0 } }, '/shape/radiusDeg'],
		['a radius past 180 degrees', { shape: { ...shape, radiusDeg: 181 } }, '/shape/radiusDeg'],
		['a containment in percent', { shape: { ...shape, containment: 90 } }, '/shape/containment'],
		['no containment', { shape: { ...shape, containment: undefined } }, '/shape/containment'],
		['no shape', { shape: undefined }, '/shape'],
		['a time without its zone', { t0: '2026-12-01T03:41:27' }, '/t0'],
		['a time in the year 9999', { t0: '9999-12-01T03:41:27Z' }, '/t0'],
		['a serial of nought', { serial: 0 }, '/serial'],
		['an unknown role', { role: 'drill' }, '/role'],
		['a field nobody knows', { colour: 'red' }, '/colour'],
		['a packet id with a space', { packetId: 'TB 1' }, '/packetId'],
		['a negative false-alarm rate', { falseAlarmPerYear: -1 }, '/falseAlarmPerYear'],
		['a retraction of nothing', { kind: 'retraction', shape: undefined }, '/cites']
	];
	it.each(wrong)(
		'refuses %s with 422, names the field and makes no alert',
		async (_, overrides, pointer) => {
			const before = await counts();
			const refused = await post(json({ packetId: 'TB-wrong', ...overrides }));
			expect(refused.status).toBe(422);
			expect(refused.type).toBe('application/problem+json');
			expect((refused.body.errors as { pointer: string }[]).map((item) => item.pointer)).toContain(
				pointer
			);
			expect(await counts()).toEqual(before);
			expect(await lastPacket()).toMatchObject({ state: 'refused', code: 'invalid' });
			expect((await lastPacket())!.detail).toContain(pointer);
		}
	);

	it.each([
		['an empty body', ''],
		['a truncated body', json().slice(0, 40)],
		['invalid UTF-8', Buffer.from([0x7b, 0xff, 0xfe, 0x7d])],
		['not JSON', '<alert/>']
	])('refuses %s with 400', async (_, body) => {
		const refused = await post(body);
		expect(refused.status).toBe(400);
		expect(refused.body).toMatchObject({ status: 400, type: 'urn:duskline:problem:malformedBody' });
	});

	it.each(['null', '[]', '3', '"text"'])('refuses the JSON value %s with 422', async (body) => {
		expect((await post(body)).status).toBe(422);
	});

	it('accepts a byte-order mark', async () => {
		const body = Buffer.concat([
			Buffer.from([0xef, 0xbb, 0xbf]),
			Buffer.from(json({ packetId: 'TB-bom' }))
		]);
		expect((await post(body)).status).toBe(201);
	});

	it('refuses another media type with 415 and a long body with 413', async () => {
		expect((await post(json(), { 'content-type': 'text/plain' })).status).toBe(415);
		expect((await post(json({ remarks: 'x'.repeat(300_000) }))).status).toBe(413);
	});

	it('refuses a missing, unknown or malformed key with 401', async () => {
		for (const authorization of [
			'',
			'Bearer nonsense',
			`Bearer ${key.slice(0, -1)}x`,
			`Basic ${key}`
		]) {
			expect((await post(json(), { authorization })).status).toBe(401);
		}
	});
});
