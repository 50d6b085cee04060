import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { openWorld, type World } from '../../../../tests/database/world';
import { streamCreateSchema } from '../../domain/stream';
import type { Actor } from '../actor';
import { streamKey } from '../db/schema/alerts';
import { authenticateStreamKey, createStreamKey, revokeStreamKey } from './streamKeyService';
import { createStream, editStream, listStreams, retireStream, streamDetail } from './streamService';

let world: World;
let steward: Actor;
let observer: Actor;

const TAMBOUR = streamCreateSchema.parse({
	code: 'tambour',
	name: 'Tambour',
	streamClass: 'gamma',
	defaultContainment: '0.9',
	defaultSystematicDeg: '0.5',
	alertsPerYear: '200',
	coincidenceWindowS: '3600',
	silentAfterMinutes: '1440',
	fadeM1Mean: '22.2',
	fadeM1Spread: '2.3',
	fadeAlpha: '1'
});

beforeAll(async () => {
	world = await openWorld();
	steward = await world.person('steward');
	observer = await world.person('observer');
	await createStream(world.app, steward, TAMBOUR);
});
afterAll(() => world.close());

const makeKey = (label = 'Ground station') =>
	createStreamKey(world.app, steward, { streamCode: 'tambour', label });
const bearer = (key: string) => authenticateStreamKey(world.app, `Bearer ${key}`);

describe('a stream’s key', () => {
	test('opens the door for its stream and is kept as a hash only', async () => {
		const { id, key, prefix } = await makeKey();
		expect(key).toMatch(/^dsk_tambour_[A-Za-z0-9_-]{32}$/);
		expect(prefix).toBe(key.slice(0, 16));
		const known = await bearer(key);
		expect(known).toMatchObject({ keyId: id, stream: { code: 'tambour', streamClass: 'gamma' } });
		const [row] = await world.app.database.select().from(streamKey).where(eq(streamKey.id, id));
		expect(JSON.stringify(row)).not.toContain(key);
		expect(row!.hash).toMatch(/^[0-9a-f]{64}$/);
	});

	test.each([
		['no header', null],
		['an empty header', ''],
		['another scheme', 'Basic dsk_tambour_xxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx'],
		['an unknown key', `Bearer dsk_tambour_${'x'.repeat(32)}`],
		['a key cut short', 'Bearer dsk_tambour_abc'],
		['two keys', 'Bearer dsk_a_b dsk_c_d']
	])('%s is refused as not signed in', async (_what, header) => {
		await expect(authenticateStreamKey(world.app, header)).rejects.toMatchObject({
			code: 'notSignedIn'
		});
	});

	test('is refused once it is revoked, and revoking twice is no error', async () => {
		const { id, key } = await makeKey();
		await revokeStreamKey(world.app, steward, { keyId: id });
		await revokeStreamKey(world.app, steward, { keyId: id });
		await expect(bearer(key)).rejects.toMatchObject({ code: 'notSignedIn' });
	});

	test('is refused while its stream is retired', async () => {
		const { key } = await makeKey();
		await retireStream(world.app, steward, 'tambour', true);
		await expect(bearer(key)).rejects.toMatchObject({ code: 'notAllowed' });
		await retireStream(world.app, steward, 'tambour', false);
		await expect(bearer(key)).resolves.toBeTruthy();
	});

	test('notes its last use at most once a minute', async () => {
		const { id, key } = await makeKey();
		const lastUsed = async () => {
			const [row] = await world.app.database.select().from(streamKey).where(eq(streamKey.id, id));
			return row!.lastUsedAt;
		};
		await bearer(key);
		const first = await lastUsed();
		world.tick(30);
		await bearer(key);
		expect(await lastUsed()).toEqual(first);
		world.tick(31);
		await bearer(key);
		expect(+(await lastUsed())! - +first!).toBe(61_000);
	});

	test('is made and revoked by stewards only', async () => {
		await expect(
			createStreamKey(world.app, observer, { streamCode: 'tambour', label: 'x' })
		).rejects.toMatchObject({ code: 'notAllowed' });
		await expect(revokeStreamKey(world.app, null, { keyId: steward.id })).rejects.toMatchObject({
			code: 'notSignedIn'
		});
	});
});

describe('a stream', () => {
	test('can’t take a code that is in use', async () => {
		await expect(createStream(world.app, steward, TAMBOUR)).rejects.toMatchObject({
			code: 'nameTaken',
			errors: [{ pointer: '/code', detail: 'The code tambour is in use.' }]
		});
	});

	test('asks for new outlooks when its fade changes', async () => {
		const { code: _code, ...settings } = TAMBOUR;
		await editStream(world.app, steward, 'tambour', { ...settings, fadeAlpha: 1.3 });
		expect(world.waitingJobs()).toContain('outlook.refreshAll');
		expect((await streamDetail(world.app, observer, 'tambour')).settings.fadeAlpha).toBe(1.3);
	});

	test('keeps its map of a VOEvent’s Params until another is given', async () => {
		const { code: _code, ...settings } = TAMBOUR;
		const paramMap = { significance: { group: 'Trigger', name: 'snr', factor: 1 } };
		await editStream(world.app, steward, 'tambour', { ...settings, paramMap });
		await editStream(world.app, steward, 'tambour', settings);
		const known = async () =>
			(await streamDetail(world.app, observer, 'tambour')).settings.paramMap;
		expect(await known()).toEqual(paramMap);
		await editStream(world.app, steward, 'tambour', { ...settings, paramMap: {} });
		expect(await known()).toEqual({});
	});

	test('counts its packets and refusals of the last day and says when it fell silent', async () => {
		const source = await authenticateStreamKey(world.app, `Bearer ${(await makeKey()).key}`);
		await world.receive(source, {
			packetId: 'TB-9',
			serial: 1,
			role: 'observation',
			kind: 'report',
			t0: world.app.now().toISOString(),
			shape: {
				kind: 'circle',
				centre: { raDeg: 80, decDeg: -5 },
				radiusDeg: 3,
				containment: 0.9
			}
		});
		await expect(world.receive(source, { packetId: 'TB-10', serial: 1 })).rejects.toMatchObject({
			code: 'invalid'
		});
		const [overview] = await listStreams(world.app, observer);
		expect(overview).toMatchObject({ packets24h: 1, refused24h: 1, silent: false });
		const { refusals } = await streamDetail(world.app, observer, 'tambour');
		expect(refusals[0]).toMatchObject({ code: 'invalid' });
		expect(refusals[0]!.detail).toMatch(/\/t0 /);
		world.tick(25 * 3600);
		const [later] = await listStreams(world.app, observer);
		expect(later).toMatchObject({ packets24h: 0, refused24h: 0, silent: true });
	});
});
