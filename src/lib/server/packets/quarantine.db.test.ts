import { desc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { alert, packet } from '../db/schema/alerts';
import { journal } from '../db/schema/transients';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { dismissPacket, listQuarantine, replayPacket, resumePackets } from './quarantineService';
import { keepPacket } from './packetStore';
import { takeIn } from './takeInService';

let world: World;
let gamma: AuthenticatedStream;
let steward: Actor;
let duty: Actor;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	steward = await world.person('steward');
	duty = await world.person('duty');
});
afterAll(() => world.close());

const send = (text: string, contentType = 'application/json') =>
	takeIn(world.app, gamma.stream, { body: Buffer.from(text), contentType, channel: 'api' });

async function refuse(text: string, contentType?: string): Promise<number> {
	await expect(send(text, contentType)).rejects.toMatchObject({ name: 'DomainError' });
	const [row] = await world.app.database.select().from(packet).orderBy(desc(packet.id)).limit(1);
	return row!.id;
}

const packetRow = async (id: number) =>
	(await world.app.database.select().from(packet).where(eq(packet.id, id)))[0]!;

describe('a body that can’t be read', () => {
	it('is kept byte for byte and listed with the reason, for stewards only', async () => {
		const text = '{"packetId": "TB-half", "serial": 1, "ro';
		const id = await refuse(text);
		const { packets, total } = await listQuarantine(world.app, steward);
		expect(total).toBe(packets.length);
		expect(packets[0]).toMatchObject({ id, streamCode: 'tambour', code: 'malformedBody', text });
		expect(packets[0]!.reason).not.toBe('');
		await expect(listQuarantine(world.app, duty)).rejects.toMatchObject({ code: 'notAllowed' });
		await expect(replayPacket(world.app, duty, id)).rejects.toMatchObject({ code: 'notAllowed' });
	});

	it('stays when a replay fails again, and leaves the list when it is dismissed, its body kept', async () => {
		const id = await refuse('<nothing/>', 'text/plain');
		await expect(replayPacket(world.app, steward, id)).rejects.toMatchObject({
			code: 'unsupportedMediaType'
		});
		expect((await packetRow(id)).state).toBe('refused');
		await dismissPacket(world.app, steward, id);
		await dismissPacket(world.app, steward, id);
		expect(await packetRow(id)).toMatchObject({
			state: 'dismissed',
			body: Buffer.from('<nothing/>')
		});
		await expect(replayPacket(world.app, steward, id)).rejects.toMatchObject({
			code: 'wrongState'
		});
	});

	it('becomes an alert when a replay reads it, with the time it came in and a word in the journal', async () => {
		const text = JSON.stringify(circlePacket({ packetId: 'TB-replay' }));
		const id = await refuse(text, 'text/plain');
		const { receivedAt } = await packetRow(id);
		// As if the stream's sender had given the wrong type and a steward put it right.
		await world.app.database
			.update(packet)
			.set({ contentType: 'application/json' })
			.where(eq(packet.id, id));
		world.tick(600);
		const intake = await replayPacket(world.app, steward, id);
		expect(intake).toMatchObject({ kind: 'alert', isNew: true });
		expect((await packetRow(id)).state).toBe('taken');
		const [row] = await world.app.database
			.select()
			.from(alert)
			.where(eq(alert.packetId, 'TB-replay'));
		expect(row).toMatchObject({ rawId: id, receivedAt });
		const lines = await world.app.database
			.select({ summary: journal.summary, kind: journal.kind })
			.from(journal)
			.where(eq(journal.transientId, row!.transientId));
		expect(lines.find(({ kind }) => kind === 'alertReceived')!.summary).toContain(
			`replayed from quarantine by ${steward.name}`
		);
	});
});

describe('a body whose process ended before it was judged', () => {
	it('is judged a minute later, once', async () => {
		const text = JSON.stringify(circlePacket({ packetId: 'TB-orphan' }));
		const received = { body: Buffer.from(text), contentType: 'application/json' };
		const now = world.app.now();
		const kept = await keepPacket(
			world.app.database,
			gamma.streamId,
			{ ...received, channel: 'api' },
			now
		);
		expect(await resumePackets(world.app)).toBe(0);
		world.tick(61);
		expect(await resumePackets(world.app)).toBe(1);
		expect(await resumePackets(world.app)).toBe(0);
		expect((await packetRow(kept.id)).state).toBe('taken');
		expect(await world.app.database.$count(alert, eq(alert.packetId, 'TB-orphan'))).toBe(1);
	});

	it('does not hold up those behind it when a fault of ours is in the way, and is listed after an hour', async () => {
		const keep = (packetId: string) =>
			keepPacket(
				world.app.database,
				gamma.streamId,
				{
					body: Buffer.from(JSON.stringify(circlePacket({ packetId }))),
					contentType: 'application/json',
					channel: 'api'
				},
				world.app.now()
			);
		const stuck = await keep('TB-stuck');
		world.tick(1);
		const next = await keep('TB-next');
		world.tick(61);
		const broken = {
			...world.app,
			queue: {
				enqueue: () => Promise.reject(new Error('out of order'))
			}
		};
		await resumePackets(broken);
		expect((await packetRow(stuck.id)).state).toBe('received');
		expect((await packetRow(next.id)).state).toBe('received');
		world.tick(3600);
		await resumePackets(broken);
		expect(await packetRow(stuck.id)).toMatchObject({ state: 'refused', code: 'unavailable' });
		await replayPacket(world.app, steward, stuck.id);
		expect((await packetRow(stuck.id)).state).toBe('taken');
	});
});
