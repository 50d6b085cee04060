import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { slot } from '../db/schema/slots';
import { journal, transient } from '../db/schema/transients';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { decideTransient, takeTransient } from '../transients/transientService';
import { claimSlot } from './slotService';

let world: World;
let gamma: AuthenticatedStream;
let duty: Actor;
let observer: Actor;
let next = 0;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	duty = await world.person('duty');
	observer = await world.person('observer');
	for (const code of ['ALM', 'ALN', 'ALP']) await world.telescope(code, [observer]);
});
afterAll(() => world.close());

/** A chased transient of a circle at Dec −8.2 with a claim on one telescope and offers on the others. */
async function claimed(telescopeCode: string) {
	const packetId = `TB-${++next}`;
	const t0 = new Date(+world.app.now() - 86_400_000 * next).toISOString();
	const packet = circlePacket({ packetId, t0, shape: circle(83.4, -8.2, 0.3) });
	const { receipt } = await world.receive(gamma, packet);
	const { designation } = receipt;
	await world.runJobs();
	await takeTransient(world.app, duty, designation);
	await decideTransient(world.app, duty, designation, { decision: 'chase', reason: '' });
	const startMs = +world.app.now() + 5 * 60_000;
	const { slotId } = await claimSlot(world.app, observer, {
		designation,
		telescopeCode,
		startAt: new Date(startMs).toISOString(),
		endAt: new Date(startMs + 30 * 60_000).toISOString()
	});
	const [row] = await world.app.database
		.select()
		.from(transient)
		.where(eq(transient.designation, designation));
	return { packetId, packet, designation, slotId, transientId: row!.id };
}

const statesOf = async (transientId: string) =>
	(await world.app.database.select().from(slot).where(eq(slot.transientId, transientId))).map(
		(row) => row.state
	);

const messages = () =>
	world
		.waiting()
		.filter(({ job }) => job.name === 'notify.mail')
		.map(({ payload }) => payload);

describe('a retraction', () => {
	it('closes the transient, lapses offers, frees the claimed telescope and tells its holder', async () => {
		const { packetId, designation, slotId, transientId } = await claimed('ALM');
		expect(await statesOf(transientId)).toContain('offered');
		await world.receive(gamma, {
			packetId: `${packetId}-r`,
			serial: 1,
			role: 'observation',
			kind: 'retraction',
			cites: [{ stream: 'tambour', packetId, relation: 'retraction' }],
			t0: world.app.now().toISOString()
		});
		expect(new Set(await statesOf(transientId))).toEqual(new Set(['lapsed', 'released']));
		expect(messages()).toEqual([
			expect.objectContaining({
				personId: observer.id,
				subject: `${designation} was retracted`,
				key: `retracted.${slotId}`
			})
		]);
		const lines = await world.app.database
			.select({ kind: journal.kind, summary: journal.summary })
			.from(journal)
			.where(eq(journal.transientId, transientId));
		expect(lines.map(({ kind }) => kind)).toEqual(
			expect.arrayContaining(['alertRetracted', 'slotReleased', 'retracted'])
		);
	});
});

describe('an update that moves the position by ten degrees', () => {
	it('goes where its first version is, is put to a person, and tells who planned by the old one', async () => {
		world.dropWaiting();
		const { packet, designation, slotId, transientId } = await claimed('ALN');
		world.dropWaiting();
		const moved = { ...packet, serial: 2, shape: circle(93.5, -8.2, 0.3) };
		const { receipt } = await world.receive(gamma, moved);
		expect(receipt.designation).toBe(designation);
		expect(await statesOf(transientId)).toContain('claimed');
		expect(messages()).toEqual([
			expect.objectContaining({ personId: observer.id, key: `moved.${slotId}.2` })
		]);
		const lines = await world.app.database
			.select({ summary: journal.summary })
			.from(journal)
			.where(eq(journal.transientId, transientId));
		expect(lines.map(({ summary }) => summary).join('\n')).toMatch(
			/replaces a position that it does not agree with \(less than 1 : 1,000,000\); somebody should look/
		);
	});

	it('tells nobody where the update agrees', async () => {
		world.dropWaiting();
		const { packet } = await claimed('ALP');
		world.dropWaiting();
		await world.receive(gamma, { ...packet, serial: 2, shape: circle(83.45, -8.2, 0.25) });
		expect(messages()).toEqual([]);
	});
});
