import { desc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import { handAlertSchema, type HandAlertFields } from '../../domain/handAlert';
import type { Actor } from '../actor';
import { alert, packet, stream } from '../db/schema/alerts';
import { journal, transient } from '../db/schema/transients';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { handAlertStreams, submitAlert } from './submitAlertService';

let world: World;
let gamma: AuthenticatedStream;
let duty: Actor;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	duty = await world.person('duty');
});
afterAll(() => world.close());

const typed = (overrides: Record<string, unknown> = {}): HandAlertFields =>
	handAlertSchema.parse({
		submission: crypto.randomUUID(),
		stream: 'tambour',
		t0: '2026-12-01 03:41:27',
		position: '05:33:36 -08:12:00',
		radius: '180',
		radiusUnit: 'arcmin',
		containment: '90',
		remarks: 'called at 04:10',
		...overrides
	});
const packets = () => world.app.database.$count(packet);
const alertNamed = async (packetId: string) =>
	(await world.app.database.select().from(alert).where(eq(alert.packetId, packetId)))[0]!;

describe('an alert entered by hand', () => {
	it('is kept as a packet of its stream, and its journal says who entered it', async () => {
		const { designation, isNew } = await submitAlert(
			world.app,
			duty,
			typed({ packetId: 'PHONE-1' })
		);
		expect(isNew).toBe(true);
		expect(await alertNamed('PHONE-1')).toMatchObject({
			role: 'observation',
			remarks: 'called at 04:10',
			shape: { kind: 'circle', radiusDeg: 3, containment: 0.9 }
		});
		const [kept] = await world.app.database.select().from(packet).orderBy(desc(packet.id)).limit(1);
		expect(kept).toMatchObject({ channel: 'form', personId: duty.id, state: 'taken' });
		const [line] = await world.app.database
			.select({ summary: journal.summary, actorId: journal.actorId })
			.from(journal)
			.innerJoin(transient, eq(transient.id, journal.transientId))
			.where(eq(transient.designation, designation))
			.orderBy(journal.id)
			.limit(1);
		expect(line!.summary).toContain(`entered by hand by ${duty.name}`);
		expect(line!.actorId).toBe(duty.id);
	});

	it('is one alert when the form is sent twice at once, named or not', async () => {
		const fields = typed({ t0: '2026-11-20 03:00:00' });
		const both = await Promise.all([
			submitAlert(world.app, duty, fields),
			submitAlert(world.app, duty, fields)
		]);
		expect(both.map(({ isNew }) => isNew).sort()).toEqual([false, true]);
		expect(both[0]!.designation).toBe(both[1]!.designation);
	});

	it('says in the journal that a right ascension was folded', async () => {
		await submitAlert(
			world.app,
			duty,
			typed({ packetId: 'PHONE-fold', t0: '2026-11-10 03:00:00', position: '-10.5 +20' })
		);
		const row = await alertNamed('PHONE-fold');
		expect(row.shape).toMatchObject({ centre: { raDeg: 349.5, decDeg: 20 } });
		const lines = await world.app.database
			.select({ summary: journal.summary })
			.from(journal)
			.where(eq(journal.transientId, row.transientId));
		expect(lines.map(({ summary }) => summary).join()).toContain('-10.5° was folded');
	});

	it('updates and retracts an earlier packet of its stream', async () => {
		const t0 = '2026-11-05T03:00:00Z';
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: 'TB-early', t0, shape: circle(83.4, -8.2, 3) })
		);
		const update = await submitAlert(
			world.app,
			duty,
			typed({ kind: 'update', earlier: 'TB-early', packetId: 'PHONE-up', t0, radius: '30' })
		);
		expect(update.designation).toBe(receipt.designation);
		expect((await alertNamed('TB-early')).live).toBe(false);
		await submitAlert(
			world.app,
			duty,
			typed({ kind: 'retraction', earlier: 'PHONE-up', t0, position: '', radius: '' })
		);
		const [row] = await world.app.database
			.select()
			.from(transient)
			.where(eq(transient.designation, receipt.designation));
		expect(row!.state).toBe('retracted');
	});

	it.each([
		['a stream that is not there', { stream: 'nobody' }, '/stream'],
		['a time nobody can read', { t0: 'this morning' }, '/t0'],
		['a day that does not exist', { t0: '2026-02-30 03:00:00' }, '/t0'],
		['a T0 hours ahead', { t0: '2026-12-01 07:00:00' }, '/t0'],
		['a position nobody can read', { position: 'over there' }, '/position'],
		['no radius', { radius: '' }, '/radius'],
		['a radius past 180°', { radius: '181', radiusUnit: 'deg' }, '/radius'],
		['a containment of 100 %', { containment: '100' }, '/containment'],
		['a name with a space', { packetId: 'TB 1' }, '/packetId'],
		['an update of a packet that is not here', { kind: 'update', earlier: 'TB-none' }, '/earlier'],
		['an update of nothing', { kind: 'update' }, '/earlier'],
		['two corners', { shape: 'polygon', vertices: '10 10\n20 10' }, '/vertices'],
		['corners of no area', { shape: 'polygon', vertices: '10 0\n20 0\n30 0' }, '/vertices'],
		[
			'half-axes the wrong way round',
			{ shape: 'ellipse', radius: '1', semiMinor: '2', positionAngle: '0' },
			'/semiMinor'
		]
	])('with %s is refused at its field, and nothing is kept', async (_, overrides, pointer) => {
		const before = await packets();
		const refusal = await submitAlert(world.app, duty, typed(overrides)).catch(
			(error: unknown) => error
		);
		expect(refusal).toMatchObject({ code: 'invalid' });
		expect((refusal as { errors: { pointer: string }[] }).errors[0]!.pointer).toBe(pointer);
		expect(await packets()).toBe(before);
	});

	it('with another content under a known name is refused at the name', async () => {
		await submitAlert(world.app, duty, typed({ packetId: 'PHONE-2', t0: '2026-10-05 03:00:00' }));
		await expect(
			submitAlert(world.app, duty, typed({ packetId: 'PHONE-2', t0: '2026-10-05 04:00:00' }))
		).rejects.toMatchObject({ code: 'packetConflict', errors: [{ pointer: '/packetId' }] });
	});

	it('is for duty scientists and stewards, and not for a retired stream', async () => {
		const observer = await world.person('observer');
		const steward = await world.person('steward');
		await expect(submitAlert(world.app, observer, typed())).rejects.toMatchObject({
			code: 'notAllowed'
		});
		const old = await world.stream('old', 'gamma');
		await world.app.database
			.update(stream)
			.set({ retiredAt: world.app.now() })
			.where(eq(stream.id, old.streamId));
		const offered = await handAlertStreams(world.app, steward);
		expect(offered.map(({ code }) => code)).toEqual(['tambour']);
		await expect(submitAlert(world.app, steward, typed({ stream: 'old' }))).rejects.toMatchObject({
			errors: [{ pointer: '/stream' }]
		});
	});
});
