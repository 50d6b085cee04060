import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type PgBoss from 'pg-boss';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openCircularWorld, type CircularWorld } from '../../../../tests/database/circularWorld';
import type { Actor } from '../actor';
import { circular, delivery } from '../db/schema/circulars';
import { journal } from '../db/schema/transients';
import { bossQueue, createBoss } from '../jobs/queue';
import { circularDetail, draftCircular, listCirculars, publishCircular } from './circularService';
import { deliverCircularJob } from './deliverCircularJob';

let world: CircularWorld;
let duty: Actor;
let partner: Actor;
let gammaOnly: Actor;

beforeAll(async () => {
	world = await openCircularWorld();
	duty = await world.person(['duty'], 'Ines Okafor');
	partner = await world.person(['partner'], 'Bo Lindqvist');
	gammaOnly = await world.person(['partner'], 'Aya Morel');
	await world.subscribe(partner.id);
	await world.subscribe(gammaOnly.id, { streamCodes: ['tambour'] });
	const tambour = await world.stream('tambour');
	const needle = await world.stream('needle');
	const first = await world.transient('D26L01-a');
	await world.alert(tambour, first, 'TB-1');
	await world.region(first);
	const second = await world.transient('D26L01-b');
	await world.alert(needle, second, 'ND-1');
	await world.transient('D26L01-c', { isDrill: true });
	await world.transient('D26L01-d', { isTest: true });
});
afterAll(() => world.close());

const text = (designation: string, draftId: string = randomUUID()) => ({
	draftId,
	designation,
	title: 'A title',
	body: 'A text'
});

const deliveriesOf = (circularId: string) =>
	world.app.database
		.select({ personId: delivery.personId, channel: delivery.channel, state: delivery.state })
		.from(delivery)
		.where(eq(delivery.circularId, circularId));

describe('publishing a circular', () => {
	it('numbers twenty at once without a gap', async () => {
		const before = await world.app.database.$count(circular);
		const published = await Promise.all(
			Array.from({ length: 20 }, () => publishCircular(world.app, duty, text('D26L01-a')))
		);
		const numbers = published.map(({ number }) => number).sort((a, b) => a - b);
		expect(numbers).toEqual(Array.from({ length: 20 }, (_, index) => before + 1 + index));
	});

	it('gives a number back when the transaction fails', async () => {
		const { number } = await publishCircular(world.app, duty, text('D26L01-a'));
		const broken = {
			...world.app,
			queue: { enqueue: () => Promise.reject(new Error('queue is away')) }
		};
		await expect(publishCircular(broken, duty, text('D26L01-a'))).rejects.toThrow('queue is away');
		expect((await publishCircular(world.app, duty, text('D26L01-a'))).number).toBe(number + 1);
	});

	it('is the same circular when the button is pressed five times', async () => {
		const input = text('D26L01-a');
		const all = await Promise.all(
			Array.from({ length: 5 }, () => publishCircular(world.app, duty, input))
		);
		expect(new Set(all.map(({ number }) => number)).size).toBe(1);
		expect(all.filter(({ created }) => created)).toHaveLength(1);
		expect(await deliveriesOf(input.draftId)).toHaveLength(2);
		await expect(
			publishCircular(world.app, duty, { ...input, body: 'Another text' })
		).rejects.toMatchObject({ code: 'wrongState' });
		const other = await world.person(['duty']);
		await expect(publishCircular(world.app, other, input)).rejects.toMatchObject({
			code: 'wrongState'
		});
	});

	it('queues it for those whose streams heard the transient, and for nobody else', async () => {
		const both = text('D26L01-a');
		const needleOnly = text('D26L01-b');
		world.jobs.length = 0;
		await publishCircular(world.app, duty, both);
		await publishCircular(world.app, duty, needleOnly);
		const names = async (id: string) =>
			(await deliveriesOf(id)).map(({ personId }) => personId).sort();
		expect(await names(both.draftId)).toEqual([gammaOnly.id, partner.id].sort());
		expect(await names(needleOnly.draftId)).toEqual([partner.id]);
		expect(world.jobs.map(({ name }) => name)).toEqual(Array(3).fill('circular.deliver'));
	});

	it('is written into the journal with its number', async () => {
		const input = text('D26L01-b');
		const { number } = await publishCircular(world.app, duty, input);
		const rows = await world.app.database
			.select()
			.from(journal)
			.where(eq(journal.kind, 'circularPublished'));
		expect(rows.find((row) => row.detail.number === number)).toMatchObject({
			actorId: duty.id,
			detail: { circularId: input.draftId }
		});
	});

	it('refuses drills, tests, unknown transients and other roles', async () => {
		const attempt = (actor: Actor | null, designation: string) =>
			publishCircular(world.app, actor, text(designation));
		await expect(attempt(duty, 'D26L01-c')).rejects.toThrow(/drill/);
		await expect(attempt(duty, 'D26L01-d')).rejects.toThrow(/test/);
		await expect(draftCircular(world.app, duty, 'D26L01-c')).rejects.toThrow(/drill/);
		await expect(attempt(duty, 'D26L01-z')).rejects.toMatchObject({ code: 'notFound' });
		await expect(attempt(partner, 'D26L01-a')).rejects.toMatchObject({ code: 'notAllowed' });
		await expect(attempt(await world.person(['pi']), 'D26L01-a')).rejects.toMatchObject({
			code: 'notAllowed'
		});
		await expect(attempt(null, 'D26L01-a')).rejects.toMatchObject({ code: 'notSignedIn' });
	});
});

describe('the queue', () => {
	let boss: PgBoss;
	beforeAll(async () => {
		boss = createBoss(world.databaseUrl);
		await boss.start();
		await boss.createQueue(deliverCircularJob.name);
	});
	afterAll(() => boss.stop({ graceful: false, close: true }));

	it('holds the jobs of what was published, and none of what was rolled back', async () => {
		const app = { ...world.app, queue: bossQueue(boss) };
		await publishCircular(app, duty, text('D26L01-a'));
		expect(await boss.getQueueSize(deliverCircularJob.name)).toBe(2);
		const input = text('D26L01-a');
		let calls = 0;
		const failing = {
			...app,
			queue: {
				enqueue: async (...[tx, job, payload, options]: Parameters<typeof app.queue.enqueue>) => {
					await app.queue.enqueue(tx, job, payload, options);
					if (++calls === 2) throw new Error('cut off');
				}
			} as typeof app.queue
		};
		await expect(publishCircular(failing, duty, input)).rejects.toThrow('cut off');
		expect(await boss.getQueueSize(deliverCircularJob.name)).toBe(2);
		expect(await deliveriesOf(input.draftId)).toEqual([]);
	});
});

describe('reading circulars', () => {
	it('shows a partner published ones only, without how they went out', async () => {
		const unpublished = randomUUID();
		const [any] = await world.app.database.select().from(circular).limit(1);
		await world.app.database.insert(circular).values({
			id: unpublished,
			transientId: any!.transientId,
			title: 'Secret draft',
			body: 'Not yet',
			authorId: duty.id
		});
		const { circulars } = await listCirculars(world.app, partner, { search: 'Secret' });
		expect(circulars).toEqual([]);
		const seen = await circularDetail(world.app, partner, 1);
		expect(seen).toMatchObject({ deliveries: null, deliveryCounts: null });
		await expect(draftCircular(world.app, partner, 'D26L01-a')).rejects.toMatchObject({
			code: 'notAllowed'
		});
	});

	it('tells each reader what was sent to them', async () => {
		const input = { ...text('D26L01-b'), title: 'Only for one' };
		await publishCircular(world.app, duty, input);
		await world.app.database
			.update(delivery)
			.set({ state: 'sent' })
			.where(eq(delivery.circularId, input.draftId));
		const find = async (actor: Actor) =>
			(await listCirculars(world.app, actor, { search: 'only for' })).circulars[0]?.toMe;
		expect(await find(partner)).toBe('sent');
		expect(await find(gammaOnly)).toBeNull();
		const mine = await listCirculars(world.app, gammaOnly, { onlyMine: true });
		expect(mine.circulars.some(({ title }) => title === 'Only for one')).toBe(false);
		expect(mine.circulars.length).toBeGreaterThan(0);
	});

	it('names recipients to those who may see deliveries, and counts to the rest of the team', async () => {
		const observer = await world.person(['observer']);
		const forObserver = await circularDetail(world.app, observer, 1);
		expect(forObserver.deliveries).toBeNull();
		expect(forObserver.deliveryCounts).toEqual({ queued: 2, sent: 0, failed: 0 });
		const forDuty = await circularDetail(world.app, duty, 1);
		expect(forDuty.deliveries?.map(({ person }) => person.name)).toEqual([
			'Aya Morel',
			'Bo Lindqvist'
		]);
	});

	it('pages backwards and takes % and _ as they are', async () => {
		const first = await listCirculars(world.app, duty, { before: 4 });
		expect(first.circulars.map(({ number }) => number)).toEqual([3, 2, 1]);
		expect((await listCirculars(world.app, duty, { search: '%' })).circulars).toEqual([]);
	});
});
