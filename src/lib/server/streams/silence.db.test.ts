import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { stream } from '../db/schema/alerts';
import { person } from '../db/schema/people';
import { submitAlert } from '../packets/submitAlertService';
import { handAlertSchema } from '../../domain/handAlert';
import { networkNotices } from './streamHealthService';
import { tellOfSilentStreams } from './silence';
import type { AuthenticatedStream } from './streamKeyService';
import { retireStream } from './streamService';

const SILENT_AFTER_MIN = 60;
let world: World;
let source: AuthenticatedStream;
let stewards: Actor[];
let count = 0;

beforeAll(async () => {
	world = await openWorld();
	stewards = [await world.person('steward'), await world.person('steward', 'duty')];
	await world.person('duty');
	const gone = await world.person('steward');
	await world.app.database
		.update(person)
		.set({ disabledAt: world.app.now() })
		.where(eq(person.id, gone.id));
});
afterAll(() => world.close());

beforeEach(async () => {
	await world.app.database.update(stream).set({ retiredAt: world.app.now() });
	source = await world.stream(`stream-${++count}`, 'gamma');
	await world.app.database
		.update(stream)
		.set({ createdAt: world.app.now(), silentAfterMinutes: SILENT_AFTER_MIN })
		.where(eq(stream.id, source.streamId));
	world.dropWaiting();
});

const hear = () =>
	world.receive(
		source,
		circlePacket({
			packetId: `TB-${++count}`,
			t0: new Date(+world.app.now() - 60_000).toISOString()
		})
	);
const told = () =>
	world
		.waiting()
		.filter(({ job }) => job.name === 'notify.mail')
		.map(({ payload }) => (payload as { personId: string }).personId)
		.sort();
const everySteward = () => stewards.map(({ id }) => id).sort();
const minutes = (value: number) => world.tick(value * 60);

describe('a stream that is silent longer than it should be', () => {
	it('is told to every enabled steward, once, and shown to all on the network pages', async () => {
		await hear();
		minutes(SILENT_AFTER_MIN);
		expect(await tellOfSilentStreams(world.app)).toBe(0);
		minutes(1);
		expect(await tellOfSilentStreams(world.app)).toBe(1);
		expect(told()).toEqual(everySteward());
		minutes(600);
		expect(await tellOfSilentStreams(world.app)).toBe(0);
		expect(told()).toHaveLength(2);
		const notices = await networkNotices(world.app, stewards[0]!);
		expect(notices.silent.map(({ code }) => code)).toEqual([source.stream.code]);
	});

	it('is told once when two workers look at once', async () => {
		minutes(SILENT_AFTER_MIN + 1);
		const outcomes = await Promise.all(
			Array.from({ length: 4 }, () => tellOfSilentStreams(world.app))
		);
		expect(outcomes.sort()).toEqual([0, 0, 0, 1]);
		expect(told()).toEqual(everySteward());
	});

	it('is told again when it was heard and fell silent again', async () => {
		minutes(SILENT_AFTER_MIN + 1);
		await tellOfSilentStreams(world.app);
		await hear();
		expect((await networkNotices(world.app, stewards[0]!)).silent).toEqual([]);
		world.dropWaiting();
		expect(await tellOfSilentStreams(world.app)).toBe(0);
		minutes(SILENT_AFTER_MIN + 1);
		expect(await tellOfSilentStreams(world.app)).toBe(1);
		expect(told()).toEqual(everySteward());
	});

	it('is heard by a copy of what it sent before, but not by what a person enters', async () => {
		const packet = circlePacket({ packetId: `TB-${++count}` });
		await world.receive(source, packet);
		minutes(SILENT_AFTER_MIN - 1);
		await world.receive(source, packet);
		minutes(2);
		expect(await tellOfSilentStreams(world.app)).toBe(0);
		minutes(SILENT_AFTER_MIN);
		await submitAlert(
			world.app,
			stewards[0]!,
			handAlertSchema.parse({
				submission: crypto.randomUUID(),
				stream: source.stream.code,
				t0: world.app.now().toISOString(),
				position: '83.4 -8.2',
				radius: '3',
				containment: '90'
			})
		);
		expect(await tellOfSilentStreams(world.app)).toBe(1);
	});

	it('is nobody’s business once it is retired', async () => {
		minutes(SILENT_AFTER_MIN + 1);
		await retireStream(world.app, stewards[0]!, source.stream.code, true);
		expect(await tellOfSilentStreams(world.app)).toBe(0);
		expect((await networkNotices(world.app, stewards[0]!)).silent).toEqual([]);
		expect(told()).toEqual([]);
	});
});
