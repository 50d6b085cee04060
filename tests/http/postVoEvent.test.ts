import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { streamKey } from '../../src/lib/server/db/schema/alerts';
import { makeStreamKey } from '../../src/lib/server/streams/streamKeyService';
import { POST } from '../../src/routes/api/v1/alerts/+server';
import { openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let key: string;

beforeAll(async () => {
	world = await openWorld();
	const { streamId } = await world.stream('tambour', 'gamma');
	const made = makeStreamKey('tambour');
	key = made.key;
	const { prefix, hash } = made;
	await world.app.database.insert(streamKey).values({ streamId, label: 'test', prefix, hash });
});
afterAll(() => world.close());

async function post(body: string | Buffer, type = 'application/voevent+xml; charset=utf-8') {
	const event = routeEvent(world.app, {
		method: 'POST',
		path: '/api/v1/alerts',
		headers: { authorization: `Bearer ${key}`, 'content-type': type },
		body: new Uint8Array(Buffer.from(body))
	});
	const response = await POST(event as unknown as Parameters<typeof POST>[0]);
	return { status: response.status, body: (await response.json()) as Record<string, unknown> };
}

const fixture = (name: string) => readFileSync(`fixtures/packets/${name}.xml`, 'utf8');

describe('POST /api/v1/alerts with a VOEvent', () => {
	it('answers 201 when it is new, 200 for a copy, 202 when it is no alert', async () => {
		const report = fixture('voeventReport');
		expect(await post(report)).toMatchObject({
			status: 201,
			body: { packetId: 'ivo://tambour.invalid/alerts#TB-26120103', serial: 1 }
		});
		expect((await post(`\ufeff${report}`, 'text/xml')).status).toBe(200);
		expect(await post(fixture('voeventUtility'), 'application/xml')).toMatchObject({
			status: 202,
			body: { noted: expect.stringContaining('role utility') as string }
		});
	});

	it.each([
		['nothing', '', 400, 'malformedBody'],
		['half of one', fixture('voeventReport').slice(0, 900), 400, 'malformedBody'],
		['a document type', `<!DOCTYPE a>${fixture('voeventTest')}`, 400, 'malformedBody'],
		['JSON', '{"packetId": "TB-1"}', 400, 'malformedBody'],
		['another document', '<html><p>Not found</p></html>', 422, 'invalid'],
		['one without a radius', fixture('voeventTest').replace('>5<', '>0<'), 422, 'invalid'],
		['one of 300 KiB', `<a>${' '.repeat(300 * 1024)}</a>`, 413, 'bodyTooLarge']
	])('refuses %s with a problem document', async (_, body, status, code) => {
		expect(await post(body)).toMatchObject({
			status,
			body: { type: `urn:duskline:problem:${code}` }
		});
	});

	it('points at the place in the document', async () => {
		const { body } = await post(
			fixture('voeventTest')
				.replace('UTC-ICRS-TOPO" />', 'UTC-FK4-TOPO" />')
				.replace('coord_system_id="UTC-ICRS-TOPO"', '')
		);
		expect(body.errors).toEqual([
			{
				pointer: '/VOEvent/WhereWhen/ObsDataLocation/ObservationLocation/AstroCoordSystem/@id',
				detail: expect.stringContaining('UTC-FK4-TOPO') as string
			}
		]);
	});
});
