import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { connectDatabase, type Connection } from '../db/database';
import { stream } from '../db/schema/alerts';
import { telescope } from '../db/schema/network';
import { person } from '../db/schema/people';
import { writeTransaction } from '../db/writeTransaction';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { boardFor, boardTextFor } from './board';
import { decideTransient, takeTransient } from './transientService';

let world: World;
let gamma: AuthenticatedStream;
let duty: Actor;
const elsewhere: Connection[] = [];

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	duty = await world.person('duty');
	await world.telescope('ALM', [await world.person('observer')]);
	await world.receive(gamma, circlePacket());
	await world.receive(gamma, circlePacket({ packetId: 'TB-2', shape: circle(200, 40, 2) }));
	await world.runJobs();
});
afterAll(async () => {
	for (const connection of elsewhere) await connection.close();
	await world.close();
});

/** The board as a process that has just started makes it, nothing remembered. */
async function freshBoard() {
	const connection = connectDatabase(world.app.config.databaseUrl, 2);
	elsewhere.push(connection);
	return boardFor({ ...world.app, ...connection }, duty);
}

describe('the remembered board', () => {
	it('is what a process that has just started would show, after every kind of change', async () => {
		const { openDesignations } = await boardFor(world.app, duty);
		const first = openDesignations[0]!;
		const changes: [string, () => Promise<unknown>][] = [
			['taken', () => takeTransient(world.app, duty, first)],
			['decided', () => decideTransient(world.app, duty, first, { decision: 'chase', reason: '' })],
			[
				'an update',
				() => world.receive(gamma, circlePacket({ serial: 2, shape: circle(83.5, -8, 2) }))
			],
			['an outlook', () => world.runJobs()],
			['the minute', () => Promise.resolve(world.tick(61))],
			['a stream', () => rename(stream, gamma.streamId, 'Pauke')],
			['a person', () => rename(person, duty.id, 'Another Name')],
			['a telescope', renameTelescope]
		];
		for (const [what, change] of changes) {
			const before = await boardFor(world.app, duty);
			await change();
			const after = await boardFor(world.app, duty);
			expect(after, what).toEqual(await freshBoard());
			if (what !== 'the minute') expect(after.revision, what).toBeGreaterThan(before.revision);
		}
	});

	it('is the same as text, whole and since a revision', async () => {
		const whole = await boardFor(world.app, duty);
		expect(JSON.parse((await boardTextFor(world.app, duty)).text)).toEqual(whole);
		const since = Math.max(...whole.transients.map((item) => item.revision)) - 1;
		const part = await boardFor(world.app, duty, since);
		expect(part.transients).toHaveLength(1);
		expect(JSON.parse((await boardTextFor(world.app, duty, since)).text)).toEqual(part);
	});
});

async function rename(table: typeof stream | typeof person, id: string, name: string) {
	await writeTransaction(world.app, async (tx, change) => {
		await tx.update(table).set({ name }).where(eq(table.id, id));
		change.touchNetwork();
	});
}

async function renameTelescope() {
	await writeTransaction(world.app, async (tx, change) => {
		await tx.update(telescope).set({ name: 'Renamed' }).where(eq(telescope.code, 'ALM'));
		change.touchNetwork();
	});
}
