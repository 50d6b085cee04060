import { readFileSync } from 'node:fs';
import { desc, eq } from 'drizzle-orm';
import { isActionFailure } from '@sveltejs/kit';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/actor';
import { alert, packet, streamKey } from '../../src/lib/server/db/schema/alerts';
import { journal } from '../../src/lib/server/db/schema/transients';
import { replayPacket } from '../../src/lib/server/packets/quarantineService';
import { makeStreamKey } from '../../src/lib/server/streams/streamKeyService';
import { actions } from '../../src/routes/(app)/transients/new/file/+page.server';
import { POST } from '../../src/routes/api/v1/alerts/+server';
import type { memoryStore } from '../database/memoryStore';
import { circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let key: string;
let steward: Actor;
let held: Map<string, Buffer>;
let count = 0;

beforeAll(async () => {
	world = await openWorld();
	steward = await world.person('steward');
	held = (world.app.files as ReturnType<typeof memoryStore>).held;
	const { streamId } = await world.stream('tambour', 'gamma');
	const made = makeStreamKey('tambour');
	key = made.key;
	await world.app.database
		.insert(streamKey)
		.values({ streamId, label: 'test', prefix: made.prefix, hash: made.hash });
});
afterAll(() => world.close());
beforeEach(() => held.clear());

const MAP = readFileSync('fixtures/sky/mo_gauss3deg.fits');
const MOC = Buffer.from('1/1 2 4 2/12-14 21 23 25 8/');

/** A packet without its region, of a day of its own so that no two belong together. */
function packetOf(packetId = `file-${++count}`): Record<string, unknown> {
	const { shape: _shape, ...rest } = circlePacket({
		packetId,
		t0: `2026-11-${String((count % 27) + 1).padStart(2, '0')}T03:00:00Z`
	});
	return rest;
}

async function post(fields: Record<string, unknown>, file?: Buffer | null, name = 'map.fits') {
	const form = new FormData();
	for (const [field, value] of Object.entries(fields)) {
		form.append(field, typeof value === 'string' ? value : JSON.stringify(value));
	}
	if (file) form.append('file', new Blob([new Uint8Array(file)]), name);
	return send(form);
}

async function send(body: BodyInit, headers: Record<string, string> = {}) {
	const event = routeEvent(world.app, {
		method: 'POST',
		path: '/api/v1/alerts',
		headers: { authorization: `Bearer ${key}`, ...headers },
		body
	});
	const response = await POST(event as unknown as Parameters<typeof POST>[0]);
	return {
		status: response.status,
		body: (await response.json()) as {
			alertId: string;
			designation: string;
			detail: string;
			errors: { pointer: string; detail: string }[];
		}
	};
}

async function lastPacket() {
	const [row] = await world.app.database.select().from(packet).orderBy(desc(packet.id)).limit(1);
	return row!;
}

describe('a file sent to POST /api/v1/alerts', () => {
	it('is kept as it came and becomes the alert’s map, once', async () => {
		const content = packetOf();
		const { status, body } = await post({ packet: content }, MAP);
		expect(status).toBe(201);
		const row = await lastPacket();
		expect(row).toMatchObject({ state: 'taken', channel: 'file', fileName: 'map.fits' });
		expect(row.fileBytes).toBe(MAP.length);
		expect(held.get(row.fileKey!)!.equals(MAP)).toBe(true);
		expect(JSON.parse(row.body.toString())).toEqual(content);
		const [stored] = await world.app.database
			.select()
			.from(alert)
			.where(eq(alert.id, body.alertId));
		expect(stored!.shape!.kind).toBe('map');
		const lines = await world.app.database
			.select({ summary: journal.summary })
			.from(journal)
			.where(eq(journal.transientId, stored!.transientId));
		expect(lines.map(({ summary }) => summary).join()).toContain('came as a file, map.fits');
		// The same again is a copy; another file under the same name and serial is refused.
		expect((await post({ packet: content }, MAP)).status).toBe(200);
		expect((await lastPacket()).state).toBe('copy');
		expect((await post({ packet: content }, MOC)).status).toBe(409);
	});

	it('may be a coverage map in text, and the packet may come as a file of its own', async () => {
		const form = new FormData();
		form.append('file', new Blob([new Uint8Array(MOC)]), 'region.txt');
		form.append('packet', new Blob([JSON.stringify(packetOf())]), 'packet.json');
		const { status, body } = await send(form);
		expect(status).toBe(201);
		const [stored] = await world.app.database
			.select()
			.from(alert)
			.where(eq(alert.id, body.alertId));
		expect(new Set((stored!.shape as { uniq: number[] }).uniq)).toEqual(
			new Set([17, 18, 20, 76, 77, 78, 85, 87, 89])
		);
	});

	it.each<
		[
			string,
			() => Promise<{ status: number; body: { errors: { pointer: string }[] } }>,
			number,
			string
		]
	>([
		['that is no map', () => post({ packet: packetOf() }, Buffer.from('PK')), 422, '/file'],
		['that is missing', () => post({ packet: packetOf() }), 422, '/file'],
		[
			'with a wrong packet',
			() => post({ packet: { ...packetOf(), serial: 0 } }, MOC),
			422,
			'/serial'
		],
		[
			'with a region beside it',
			() => post({ packet: circlePacket({ packetId: 'both' }) }, MOC),
			422,
			'/shape'
		]
	])('%s is refused and kept in quarantine', async (_name, call, status, pointer) => {
		const answer = await call();
		expect(answer.status).toBe(status);
		expect(answer.body.errors.map((error) => error.pointer)).toContain(pointer);
		expect((await lastPacket()).state).toBe('refused');
	});

	it('that is larger than 64 MiB is refused; nothing of it stays in storage', async () => {
		const { status } = await post({ packet: packetOf() }, Buffer.alloc(64 * 1024 * 1024 + 1));
		expect(status).toBe(413);
		expect(held.size).toBe(0);
		expect(await lastPacket()).toMatchObject({ state: 'refused', code: 'bodyTooLarge' });
	});

	it('that is cut off on the way is refused; nothing of it stays in storage', async () => {
		const type = { 'content-type': 'multipart/form-data; boundary=x' };
		const head = '--x\r\ncontent-disposition: form-data; name="file"; filename="a"\r\n\r\n';
		expect((await send(`${head}1/1 2`, type)).status).toBe(400);
		expect((await send('', { 'content-type': 'multipart/form-data' })).status).toBe(400);
		expect(held.size).toBe(0);
	});

	it('is read again from storage when a steward replays it', async () => {
		const broken = MAP.subarray(0, 9000);
		expect((await post({ packet: packetOf('replayed') }, broken)).status).toBe(422);
		const row = await lastPacket();
		expect(row.detail).toMatch(/^\/file HDU 1, NAXIS2 asks for \d+ bytes/);
		held.set(row.fileKey!, MAP);
		const intake = await replayPacket(world.app, steward, row.id);
		expect(intake).toMatchObject({ kind: 'alert', isNew: true });
		expect((await lastPacket()).state).toBe('taken');
	});
});

describe('the form for files', () => {
	async function enter(fields: Record<string, string>, file: Buffer | null, actor = steward) {
		const form = new FormData();
		for (const [name, value] of Object.entries(fields)) form.append(name, value);
		form.append('file', new Blob(file ? [new Uint8Array(file)] : []), file ? 'map.fits' : '');
		const event = routeEvent(world.app, {
			method: 'POST',
			path: '/transients/new/file',
			body: form,
			actor
		});
		return actions.default!(event as never);
	}
	const fields = {
		stream: 'tambour',
		role: 'observation',
		packetId: 'by-hand',
		serial: '1',
		t0: '2026-10-03 02:10:00',
		significance: '',
		falseAlarmPerYear: '0.5',
		remarks: 'sent by mail'
	};

	it('makes an alert, with who sent it', async () => {
		const outcome = await enter(fields, MAP);
		expect(outcome).toMatchObject({ entered: { isNew: true } });
		expect(await lastPacket()).toMatchObject({
			channel: 'form',
			personId: steward.id,
			state: 'taken'
		});
		const [stored] = await world.app.database
			.select()
			.from(alert)
			.where(eq(alert.packetId, 'by-hand'));
		expect(stored).toMatchObject({ kind: 'report', falseAlarmPerYear: 0.5, significance: null });
		expect(stored!.t0.toISOString()).toBe('2026-10-03T02:10:00.000Z');
	});

	it('names the fields that are wrong and keeps nothing', async () => {
		const before = (await lastPacket()).id;
		const wrong = { ...fields, stream: 'none', serial: 'one', t0: 'yesterday' };
		for (const file of [MAP, null]) {
			const outcome = await enter(wrong, file);
			expect(isActionFailure(outcome) && outcome.status).toBe(422);
			const { errors } = (outcome as { data: { errors: { pointer: string }[] } }).data;
			const pointers = errors.map(({ pointer }) => pointer);
			expect(pointers).toEqual(expect.arrayContaining(['/stream', '/serial', '/t0']));
			expect(pointers.includes('/file')).toBe(file === null);
		}
		expect((await lastPacket()).id).toBe(before);
		expect(held.size).toBe(0);
	});

	it('is for duty and stewards', async () => {
		const outcome = await enter(fields, MAP, await world.person('observer'));
		expect(isActionFailure(outcome) && outcome.status).toBe(403);
	});
});
