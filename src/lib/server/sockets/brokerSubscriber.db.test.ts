import { asc, eq, sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { startVoeventBroker, type VoeventBroker } from '../../../../fakes/voeventBroker';
import { openWorld, type World } from '../../../../tests/database/world';
import { packet, stream, streamBroker } from '../db/schema/alerts';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { startBrokerSubscriber } from './brokerSubscriber';
import { SOCKET_TIMINGS } from './socketTimings';

const QUICK = {
	...SOCKET_TIMINGS,
	firstRetryMs: 10,
	longestRetryMs: 40,
	pollMs: 50,
	noteAliveMs: 10
};
/** For a process that shall not come back by itself. */
const ONCE = { ...QUICK, pollMs: 3_600_000 };
const SOON = { timeout: 5_000, interval: 20 };

let world: World;
let source: AuthenticatedStream;
let broker: VoeventBroker;
let brokerId: string;
let stops: (() => Promise<void>)[] = [];

beforeAll(async () => {
	world = await openWorld();
	source = await world.stream('carapace', 'wideXray');
});
afterAll(() => world.close());

beforeEach(async () => {
	broker = await startVoeventBroker({ vtpPort: 0, httpPort: 0, aliveEveryMs: 30 });
	brokerId = await addRow(broker.port);
});
afterEach(async () => {
	await Promise.all(stops.map((stop) => stop()));
	stops = [];
	await broker.close();
	await world.app.database.delete(streamBroker);
	await world.app.database.delete(packet);
});

async function addRow(port: number, host = '127.0.0.1'): Promise<string> {
	const [row] = await world.app.database
		.insert(streamBroker)
		.values({ streamId: source.streamId, host, port })
		.returning();
	return row!.id;
}

function subscribe(timings = QUICK): () => Promise<void> {
	const stop = startBrokerSubscriber(world.app, timings);
	stops.push(stop);
	return stop;
}

const row = async () =>
	(await world.app.database.select().from(streamBroker).where(eq(streamBroker.id, brokerId)))[0]!;
const packets = () => world.app.database.select().from(packet).orderBy(asc(packet.id));

/** The database connections that hold a socket's lock. */
async function holders(): Promise<number[]> {
	const { rows } = await world.app.database.execute<{ pid: number }>(
		sql`select a.pid from pg_stat_activity a join pg_locks l using (pid)
			where a.application_name = 'duskline socket' and l.locktype = 'advisory' and l.granted
				and a.datname = current_database()`
	);
	return rows.map(({ pid }) => pid);
}

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

describe('the subscriber', () => {
	it('keeps every body, acknowledges it even when it goes to quarantine, and notes how it fares', async () => {
		const stop = subscribe();
		broker.post('<VOEvent ivorn="ivo://carapace.example/alerts#CP-1"');
		await vi.waitFor(() => expect(broker.events()[0]!.state).toBe('acked'), SOON);
		expect(await packets()).toMatchObject([
			{
				streamId: source.streamId,
				channel: 'socket',
				contentType: 'application/voevent+xml',
				keyId: null,
				state: 'refused',
				body: Buffer.from('<VOEvent ivorn="ivo://carapace.example/alerts#CP-1"')
			}
		]);
		await vi.waitFor(
			async () =>
				expect(await row()).toMatchObject({
					connectedAt: expect.any(Date) as Date,
					lastAliveAt: expect.any(Date) as Date,
					lastError: null
				}),
			SOON
		);
		await stop();
		expect(await row()).toMatchObject({ connectedAt: null, lastError: null });
		expect(await holders()).toEqual([]);
	});

	it('is one among many: the others take over when the first ends', async () => {
		const stop = subscribe();
		await vi.waitFor(() => expect(broker.subscribers()).toBe(1), SOON);
		subscribe();
		subscribe();
		await pause(300);
		expect(broker.subscribers()).toBe(1);
		expect(await holders()).toHaveLength(1);
		await stop();
		await vi.waitFor(() => expect(broker.subscribers()).toBe(1), SOON);
		await pause(200);
		expect(broker.subscribers()).toBe(1);
		expect(await holders()).toHaveLength(1);
	});

	it('started many at once, is one', async () => {
		for (let i = 0; i < 6; i++) subscribe();
		await vi.waitFor(() => expect(broker.subscribers()).toBe(1), SOON);
		await pause(300);
		expect(broker.subscribers()).toBe(1);
		expect(await holders()).toHaveLength(1);
	});

	it('loses the socket with the lock, and another takes over with nothing lost', async () => {
		subscribe(ONCE);
		await vi.waitFor(async () => expect(await holders()).toHaveLength(1), SOON);
		await vi.waitFor(() => expect(broker.subscribers()).toBe(1), SOON);
		const [first] = await holders();
		await world.app.database.execute(sql`select pg_terminate_backend(${first})`);
		await vi.waitFor(() => expect(broker.subscribers()).toBe(0), SOON);
		broker.post('posted while nobody listened');
		subscribe();
		await vi.waitFor(() => expect(broker.events()[0]!.state).toBe('acked'), SOON);
		expect(broker.subscribers()).toBe(1);
		expect(await holders()).not.toContain(first);
		expect(await packets()).toHaveLength(1);
		expect((await row()).connectedAt).not.toBeNull();
	});

	it('follows brokers that are switched, removed and added, and streams that retire', async () => {
		const { database } = world.app;
		subscribe();
		const connected = (count: number) =>
			vi.waitFor(() => expect(broker.subscribers()).toBe(count), SOON);
		await connected(1);
		const set = (values: Partial<typeof streamBroker.$inferInsert>) =>
			database.update(streamBroker).set(values).where(eq(streamBroker.id, brokerId));
		await set({ enabled: false });
		await connected(0);
		expect((await row()).connectedAt).toBeNull();
		await set({ enabled: true });
		await connected(1);
		await database.update(stream).set({ retiredAt: world.app.now() });
		await connected(0);
		await database.update(stream).set({ retiredAt: null });
		await connected(1);
		await set({ ivornPrefix: 'ivo://carapace.example/' });
		await connected(0);
		await connected(1);
		broker.post('<VOEvent ivorn="ivo://other.example/alerts#1"/>');
		await vi.waitFor(() => expect(broker.events()[0]!.state).toBe('acked'), SOON);
		expect(await packets()).toEqual([]);
		await database.delete(streamBroker);
		await connected(0);
		brokerId = await addRow(broker.port, 'localhost');
		await connected(1);
	});

	it('says in words why there is no connection', async () => {
		broker.fail('refuse');
		subscribe();
		await vi.waitFor(
			async () =>
				expect(await row()).toMatchObject({
					connectedAt: null,
					lastError: expect.stringMatching(/^The broker (cut|closed) the connection$/) as string,
					lastErrorAt: world.app.now()
				}),
			SOON
		);
	});

	it('goes on with the other brokers when one is not there', async () => {
		await addRow(1);
		subscribe();
		await vi.waitFor(() => expect(broker.alive()).toBeGreaterThan(2), SOON);
	});
});
