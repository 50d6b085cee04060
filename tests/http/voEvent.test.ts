import { readFileSync } from 'node:fs';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/actor';
import { transient } from '../../src/lib/server/db/schema/transients';
import { takeIn } from '../../src/lib/server/packets/takeInService';
import type { AuthenticatedStream } from '../../src/lib/server/streams/streamKeyService';
import { readVoEvent } from '../../src/lib/server/voevent/readVoEvent';
import { readXml } from '../../src/lib/server/voevent/readXml';
import { childOf, childrenOf } from '../../src/lib/server/voevent/xmlElement';
import { GET } from '../../src/routes/api/v1/transients/[designation=designation]/voevent/+server';
import { circle, circlePacket, openWorld, type World } from '../database/world';
import { schemaFaults, whyNoSchemaCheck } from '../unit/xmllint';
import { routeEvent } from './callRoute';

let world: World;
let tambour: AuthenticatedStream;
let carapace: AuthenticatedStream;
let duty: Actor;

const missing = whyNoSchemaCheck();
if (missing !== null) console.warn(`SKIPPED: our own VOEvents against their schema, as ${missing}`);

beforeAll(async () => {
	world = await openWorld();
	tambour = await world.stream('tambour', 'gamma');
	carapace = await world.stream('carapace', 'wideXray');
	duty = await world.person('duty');
});
afterAll(() => world.close());

const fixture = (name: string) => readFileSync(`fixtures/packets/${name}.xml`, 'utf8');
const AUTHOR = 'ivo://127.0.0.1/duskline';

async function send(source: AuthenticatedStream, text: string): Promise<string> {
	const body = Buffer.from(text);
	const intake = await takeIn(world.app, source.stream, {
		body,
		contentType: 'application/xml',
		channel: 'api'
	});
	if (intake.kind !== 'alert') throw new Error(intake.reason);
	return intake.receipt.designation;
}

async function get(designation: string, actor: Actor | null = duty) {
	const event = routeEvent(world.app, {
		path: `/api/v1/transients/${designation}/voevent`,
		params: { designation },
		actor
	});
	const response = await GET(event as unknown as Parameters<typeof GET>[0]);
	return { response, text: await response.text() };
}

/** What our own reader makes of our own document; also held against the schema where that is possible. */
async function contentOf(designation: string) {
	const { response, text } = await get(designation);
	expect(response.status, text).toBe(200);
	expect(response.headers.get('content-type')).toBe('application/voevent+xml; charset=utf-8');
	if (missing === null) expect(schemaFaults(text)).toBe('');
	const body = Buffer.from(text);
	const outcome = readVoEvent(
		{ body, receivedAt: world.app.now() },
		{ paramMap: {}, defaultContainment: 0.9, defaultSystematicDeg: 0 }
	);
	if (outcome.kind !== 'alert') throw new Error(outcome.reason);
	expect(outcome.notes.filter((note) => !note.includes('retraction'))).toEqual([]);
	return { text, root: readXml(body), content: outcome.content };
}

describe('GET /api/v1/transients/…/voevent', () => {
	it('is a VOEvent of the joint region, which grows by versions that supersede each other', async () => {
		const designation = await send(tambour, fixture('voeventReport'));
		const first = await contentOf(designation);
		expect(first.content).toMatchObject({
			packetId: `${AUTHOR}#${designation}.1`,
			role: 'observation',
			kind: 'report',
			t0: '2026-12-01T03:41:27.250Z',
			cites: [{ packetId: 'ivo://tambour.invalid/alerts#TB-26120103', relation: 'followup' }]
		});
		const shape = first.content.shape;
		if (shape?.kind !== 'circle') throw new Error('no circle');
		// One circle of 3° at 90 % and nothing else: the joint region is that circle.
		expect(shape.centre.raDeg).toBeCloseTo(83.4, 6);
		expect(shape.centre.decDeg).toBeCloseTo(-8.2, 6);
		expect(shape.radiusDeg).toBeCloseTo(3, 4);
		expect((await get(designation)).text).toBe(first.text);

		world.tick(60);
		await send(carapace, fixture('voeventFollowup'));
		const second = await contentOf(designation);
		expect(second.content).toMatchObject({
			packetId: `${AUTHOR}#${designation}.2`,
			kind: 'update',
			cites: [
				{ packetId: `${AUTHOR}#${designation}.1`, relation: 'supersedes' },
				{ packetId: 'ivo://tambour.invalid/alerts#TB-26120103', relation: 'followup' },
				{ packetId: 'ivo://carapace.invalid/alerts#CP-0071', relation: 'followup' }
			]
		});
		const what = childOf(second.root, 'What');
		expect(childOf(what, 'Param')?.attributes.get('value')).toBe(designation);
		const params = new Map(
			childrenOf(childOf(what, 'Group'), 'Param').map(({ attributes }) => [
				attributes.get('name'),
				Number(attributes.get('value'))
			])
		);
		expect(params.get('containment')).toBe(0.9);
		expect(params.get('alerts')).toBe(2);
		expect(params.get('area_90')).toBeGreaterThan(0);
		expect(params.get('agreement_log10_odds')).toBeGreaterThan(1);
		expect(second.content.remarks).toContain('The alerts have one source (associated, probability');
		expect(second.content.remarks).toContain(`http://127.0.0.1:4180/transients/${designation}`);
	});

	it('is a retraction once the transient is retracted', async () => {
		const other = (name: string) =>
			fixture(name)
				.replaceAll('TB-26120103', 'TB-R')
				.replace(/(<ISOTime>)\d{4}-\d{2}-\d{2}/, '$12026-11-22');
		const designation = await send(tambour, other('voeventReport'));
		world.tick(60);
		await send(tambour, other('voeventRetraction'));
		const { content } = await contentOf(designation);
		expect(content).toMatchObject({
			packetId: `${AUTHOR}#${designation}.1.retraction`,
			kind: 'retraction',
			cites: [
				{ packetId: `${AUTHOR}#${designation}.1`, relation: 'retraction' },
				{ packetId: 'ivo://tambour.invalid/alerts#TB-R', relation: 'retraction' },
				{ packetId: 'ivo://tambour.invalid/alerts#TB-R-retracted', relation: 'followup' }
			]
		});
		expect(content.shape).toBeUndefined();
		expect(Date.parse(content.t0)).toBe(world.app.now().getTime());
	});

	it('cites no packets without an IVORN, and marks tests and drills', async () => {
		const t0 = '2026-11-18T01:00:00Z';
		const made = await world.receive(tambour, circlePacket({ packetId: 'TB-<&>"', t0 }));
		const { designation } = made.receipt;
		const plain = await contentOf(designation);
		expect(plain.content.cites).toEqual([]);
		expect(plain.content.remarks).toContain('tambour TB-<&>"');
		const { database } = world.app;
		await database
			.update(transient)
			.set({ isDrill: true })
			.where(eq(transient.designation, designation));
		const drill = await contentOf(designation);
		expect(drill.content.role).toBe('test');
		expect(drill.content.remarks).toContain('Drill.');
		const test = await send(tambour, fixture('voeventTest'));
		expect((await contentOf(test)).content.role).toBe('test');
	});

	it('says when the alerts do not overlap', async () => {
		const t0 = '2026-11-17T01:00:00Z';
		const cites = [{ stream: 'tambour', packetId: 'TB-apart', relation: 'followup' }];
		const one = circlePacket({ packetId: 'TB-apart', t0, shape: circle(10, 0, 1) });
		const two = circlePacket({ packetId: 'CP-apart', t0, cites, shape: circle(40, 0, 0.1) });
		const { designation } = (await world.receive(tambour, one)).receipt;
		expect((await world.receive(carapace, two)).receipt.designation).toBe(designation);
		const { content } = await contentOf(designation);
		expect(content.remarks).toContain('do not overlap');
	});

	it('is refused where there is nothing to say, and to those who may not see transients', async () => {
		const cites = [{ stream: 'tambour', packetId: 'TB-never-came', relation: 'retraction' }];
		const early = circlePacket({
			packetId: 'TB-early',
			kind: 'retraction',
			shape: undefined,
			cites
		});
		const { designation } = (await world.receive(tambour, early)).receipt;
		const { response, text } = await get(designation);
		expect([response.status, JSON.parse(text)]).toMatchObject([
			409,
			{ type: 'urn:duskline:problem:wrongState' }
		]);
		expect((await get('D99A01-a')).response.status).toBe(404);
		const partner = await world.person('partner');
		expect((await get(designation, partner)).response.status).toBe(403);
		expect((await get(designation, null)).response.status).toBe(401);
	});
});
