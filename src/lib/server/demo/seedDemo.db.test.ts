import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { openWorld, type World } from '../../../../tests/database/world';
import { authenticateStreamKey } from '../streams/streamKeyService';
import { currentWatch } from '../rota/rotaService';
import { seedDemo, type SeedResult } from './seedDemo';

let world: World;
let first: SeedResult;

beforeAll(async () => {
	world = await openWorld();
	first = await seedDemo(world.app, null);
});
afterAll(() => world.close());

async function rows<Row extends Record<string, unknown>>(text: string): Promise<Row[]> {
	return (await world.app.database.execute(sql.raw(text))).rows as Row[];
}

const COUNTED = [
	'person',
	'telescope',
	'telescope_observer',
	'closure',
	'stream',
	'watch',
	'transient',
	'packet',
	'alert',
	'region',
	'slot',
	'report',
	'circular',
	'delivery',
	'subscription',
	'journal'
];

async function counts(): Promise<Record<string, number>> {
	const parts = COUNTED.map((table) => `(select count(*)::int from "${table}") as "${table}"`);
	const [row] = await rows<Record<string, number>>(`select ${parts.join(', ')}`);
	return row!;
}

test('a second run makes no second copy and leaves the keys alone', async () => {
	const before = await counts();
	expect(before).toMatchObject({ person: 16, telescope: 13, stream: 3, transient: 66 });
	const again = await seedDemo(world.app, first.keys);
	expect(again).toMatchObject({ made: false, keys: null });
	expect(await counts()).toEqual(before);
});

test('a second run without the key file gives new keys and revokes the old ones', async () => {
	const renewed = await seedDemo(world.app, null);
	const old = await rows<{ live: number }>(
		'select count(*)::int as live from stream_key where revoked_at is null'
	);
	expect(old[0]!.live).toBe(3);
	await expect(
		authenticateStreamKey(world.app, `Bearer ${first.keys!.tambour}`)
	).rejects.toMatchObject({ code: 'notSignedIn' });
	const { stream } = await authenticateStreamKey(world.app, `Bearer ${renewed.keys!.tambour}`);
	expect(stream.code).toBe('tambour');
});

test('one stream is subscribed to the broker that is named, whatever port it had before', async () => {
	const brokers = () => rows('select host, port, enabled, ivorn_prefix from stream_broker');
	expect(await brokers()).toEqual([]);
	for (const port of [4185, 4195, 4195]) {
		const demoBroker = { host: '127.0.0.1', port };
		await seedDemo({ ...world.app, config: { ...world.app.config, demoBroker } }, null);
		expect(await brokers()).toEqual([
			{ host: '127.0.0.1', port, enabled: true, ivorn_prefix: 'ivo://carapace.example/' }
		]);
	}
	const [source] = await rows(`select param_map from stream where code = 'carapace'`);
	expect(source).toMatchObject({ param_map: { significance: { name: 'significance' } } });
});

test('nothing lies in the future but watches, claims and closures', async () => {
	const now = world.app.now().toISOString();
	const [late] = await rows(
		`select (select max(at) from journal) <= '${now}' as journal,
			(select max(received_at) from packet) <= '${now}' as packets,
			(select max(reported_at) from report) <= '${now}' as reports,
			(select max(published_at) from circular) <= '${now}' as circulars`
	);
	expect(late).toEqual({ journal: true, packets: true, reports: true, circulars: true });
});

test('every step follows the one before it', async () => {
	const broken = await rows(
		`select transient_id from (
			select transient_id,
				min(at) filter (where kind = 'alertReceived') as received,
				min(at) filter (where kind = 'taken') as taken,
				min(at) filter (where kind = 'decided') as decided,
				min(at) filter (where kind = 'slotClaimed') as claimed,
				min(at) filter (where kind = 'onSky') as exposed,
				min(at) filter (where kind = 'circularPublished') as circulated
			from journal group by 1) steps
		where taken < received or decided < taken or claimed < decided or exposed < claimed
			or circulated < exposed`
	);
	expect(broken).toEqual([]);
});

test('observers claim only telescopes they work with, while those are not closed', async () => {
	const foreign = await rows(
		`select slot.id from slot where claimed_by is not null and (not exists (
			select from telescope_observer o where o.telescope_id = slot.telescope_id and o.person_id = slot.claimed_by
		) or exists (
			select from closure c where c.telescope_id = slot.telescope_id and c.during && slot.during))`
	);
	expect(foreign).toEqual([]);
});

test('the median of each step is near what the response page is meant to show', async () => {
	const [median] = await rows<Record<string, number>>(
		`with steps as (
			select t.t0, min(at) filter (where kind = 'alertReceived') as received,
				min(at) filter (where kind = 'taken') as taken,
				min(at) filter (where kind = 'onSky') as exposed
			from journal join transient t on t.id = transient_id where not t.is_test group by t.id)
		select percentile_cont(0.5) within group (order by extract(epoch from received - t0))::float as "receivedS",
			percentile_cont(0.5) within group (order by extract(epoch from taken - received))::float as "takenS",
			percentile_cont(0.5) within group (order by extract(epoch from exposed - t0))::float as "exposedS"
		from steps`
	);
	expect(median!.receivedS).toBeGreaterThan(12);
	expect(median!.receivedS).toBeLessThan(40);
	expect(median!.takenS).toBeGreaterThan(100);
	expect(median!.takenS).toBeLessThan(260);
	expect(median!.exposedS).toBeGreaterThan(10 * 60);
	expect(median!.exposedS).toBeLessThan(40 * 60);
});

test('one transient is happening now, untaken, narrowed by an X-ray position, with telescopes that see it', async () => {
	await world.runJobs();
	const open = await rows<{ takenBy: string | null; regions: number; openNow: number }>(
		`select t.taken_by as "takenBy", t.region_version as regions,
			(select count(*)::int from jsonb_array_elements(o.body->'rows') r
				where (r->>'opensMs')::float8 <= (o.body->>'computedMs')::float8) as "openNow"
		from transient t join outlook o on o.transient_id = t.id
		where t.state = 'open' order by t.t0 desc`
	);
	expect(open).toHaveLength(3);
	expect(open[0]).toMatchObject({ takenBy: null, regions: 2 });
	expect(open[0]!.openNow).toBeGreaterThanOrEqual(2);
});

test('somebody is on watch and somebody is next', async () => {
	const watch = await currentWatch(world.app);
	expect(watch?.first.name).toBeTruthy();
	expect(watch?.next?.id).not.toBe(watch?.first.id);
});

test('the demo is not mixed into a database with people of its own', async () => {
	const other = await openWorld();
	try {
		await other.person('steward');
		await expect(seedDemo(other.app, null)).rejects.toMatchObject({ code: 'wrongState' });
	} finally {
		await other.close();
	}
});
