import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { NIGHT, openWorld, type World } from '../../../../tests/database/world';
import { watchSchema } from '../../domain/watch';
import type { Actor } from '../actor';
import { parseInput } from '../http/problem';
import { setDisabled } from '../people/peopleService';
import { currentWatch, removeWatch, rotaAhead, saveWatch } from './rotaService';

let world: World;
let steward: Actor;
let ada: Actor;
let ben: Actor;

beforeAll(async () => {
	world = await openWorld();
	steward = await world.person('steward');
	ada = await world.person('duty');
	ben = await world.person('duty');
});
afterAll(() => world.close());

const at = (hours: number) => new Date(+NIGHT + hours * 3_600_000).toISOString();
const watch = (startH: number, endH: number, more: Record<string, unknown> = {}) =>
	parseInput(watchSchema, {
		startAt: at(startH),
		endAt: at(endH),
		firstPersonId: ada.id,
		...more
	});

test('without a watch nobody is on', async () => {
	expect(await currentWatch(world.app)).toBeNull();
});

describe('the rota', () => {
	let firstId: string;

	test('says who is on watch, with whom, and who is next', async () => {
		({ id: firstId } = await saveWatch(
			world.app,
			steward,
			watch(-2, 6, { secondPersonId: ben.id })
		));
		await saveWatch(world.app, steward, watch(8, 16, { firstPersonId: ben.id }));
		expect(await currentWatch(world.app)).toMatchObject({
			first: { id: ada.id },
			second: { id: ben.id },
			endAt: at(6),
			next: { id: ben.id }
		});
	});

	test('shows the gap between two watches', async () => {
		const { entries } = await rotaAhead(world.app, ada, 1);
		expect(entries.map(({ kind, startAt, endAt }) => [kind, startAt, endAt])).toEqual([
			['watch', at(-2), at(6)],
			['gap', at(6), at(8)],
			['watch', at(8), at(16)],
			['gap', at(16), at(24)]
		]);
	});

	test('refuses an overlapping watch in words', async () => {
		await expect(saveWatch(world.app, steward, watch(5, 9))).rejects.toMatchObject({
			code: 'invalid',
			message: expect.stringMatching(
				/^It overlaps Person \d+’s watch from 2026-12-01 02:12 UTC to 2026-12-01 10:12 UTC\.$/
			) as string
		});
	});

	test('lets one of two overlapping watches entered at once through, and explains to the other', async () => {
		const results = await Promise.allSettled(
			Array.from({ length: 8 }, (_, index) =>
				saveWatch(world.app, steward, watch(40 + index / 4, 48))
			)
		);
		expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
		for (const result of results) {
			if (result.status === 'rejected') expect(result.reason).toMatchObject({ code: 'invalid' });
		}
	});

	test('a watch may touch the next one and may be moved over itself', async () => {
		await saveWatch(world.app, steward, watch(6, 8));
		await saveWatch(world.app, steward, watch(-3, 6, { id: firstId }));
		expect((await currentWatch(world.app))?.startAt).toBe(at(-3));
	});

	test('only duty scientists stand on it, and only stewards change it', async () => {
		await expect(
			saveWatch(world.app, steward, watch(60, 68, { firstPersonId: steward.id }))
		).rejects.toMatchObject({ errors: [{ pointer: '/firstPersonId' }] });
		await expect(saveWatch(world.app, ada, watch(60, 68))).rejects.toMatchObject({
			code: 'notAllowed'
		});
	});

	test('marks the watches of somebody who can’t serve any more', async () => {
		await setDisabled(world.app, steward, ben.id, true);
		const { entries, candidates } = await rotaAhead(world.app, ada, 1);
		const serving = entries.flatMap((entry) =>
			entry.kind === 'watch' ? [[entry.first.id === ben.id, entry.firstServes]] : []
		);
		expect(serving).toContainEqual([true, false]);
		expect(serving).not.toContainEqual([false, false]);
		expect(candidates.map(({ id }) => id)).toEqual([ada.id]);
		await setDisabled(world.app, steward, ben.id, false);
	});

	test('a removed watch is gone, and removing it again says so', async () => {
		await removeWatch(world.app, steward, { id: firstId });
		expect(await currentWatch(world.app)).toBeNull();
		await expect(removeWatch(world.app, steward, { id: firstId })).rejects.toMatchObject({
			code: 'notFound'
		});
	});
});

test('a watch that ends before it starts, is too long or has one person twice is refused', () => {
	expect(() => watch(3, 2)).toThrow();
	expect(() => watch(0, 25)).toThrow();
	expect(() => watch(0, 8, { secondPersonId: ada.id })).toThrow();
});
