import { setTimeout as delay } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Board } from '../../src/lib/domain/board';
import type { Actor } from '../../src/lib/server/actor';
import { followRevisions } from '../../src/lib/server/db/boardRevisions';
import { takeTransient } from '../../src/lib/server/transients/transientService';
import { GET } from '../../src/routes/api/v1/board/+server';
import { circle, circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let duty: Actor;
let designation: string;

beforeAll(async () => {
	world = await openWorld();
	duty = await world.person('duty');
	const gamma = await world.stream('tambour', 'gamma');
	designation = (await world.receive(gamma, circlePacket())).receipt.designation;
});
afterAll(() => world.close());

async function get(query = '', etag?: string): Promise<Response> {
	const event = routeEvent(world.app, {
		path: `/api/v1/board${query}`,
		actor: duty,
		headers: etag ? { 'if-none-match': etag } : {}
	});
	return GET(event as unknown as Parameters<typeof GET>[0]);
}

describe('GET /api/v1/board', () => {
	it('answers 304 until something changes, for strong, weak and listed validators', async () => {
		const first = await get();
		const etag = first.headers.get('etag')!;
		expect(((await first.json()) as Board).openDesignations).toEqual([designation]);
		for (const header of [etag, `W/${etag}`, `"1", ${etag}`, '*']) {
			expect((await get('', header)).status).toBe(304);
		}
		await takeTransient(world.app, duty, designation);
		const changed = await get('', etag);
		expect(changed.status).toBe(200);
		expect(changed.headers.get('etag')).not.toBe(etag);
	});

	it('answers from memory while it is told of changes, also of those made elsewhere', async () => {
		const stop = await followRevisions(world.app);
		const etag = (await get()).headers.get('etag')!;
		expect((await get('', etag)).status).toBe(304);
		// Another process: its change is heard by PostgreSQL's notification alone.
		await world.app.pool.query('update board_revision set value = value + 1');
		await world.app.pool.query(
			`select pg_notify('duskline_board', (select value::text from board_revision))`
		);
		let status = 304;
		for (let tries = 0; tries < 100 && status === 304; tries++) {
			await delay(20);
			status = (await get('', etag)).status;
		}
		expect(status).toBe(200);
		await stop();
	});

	it('takes a `since` that makes no sense for none', async () => {
		for (const query of ['?since=abc', '?since=-4', '?since=1e99', '?since=999999']) {
			const board = (await (await get(query)).json()) as Board;
			expect(board.transients).toHaveLength(1);
		}
	});
});

describe('the board’s outlook', () => {
	it('carries what its numbers are explained by: fade, limits, depth and what is missing', async () => {
		await world.telescope('ALM');
		await world.telescope('FAR', [], { latDeg: 82 });
		const gamma = await world.stream('carapace', 'wideXray');
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: 'later', t0: '2026-12-01T04:00:00Z', shape: circle(60, -10, 1) })
		);
		await world.runJobs();
		const board = (await (await get()).json()) as Board;
		const shown = board.transients.find((item) => item.designation === receipt.designation);
		expect(shown?.outlook?.fade).toEqual({
			m1Mean: 22.2,
			m1Spread: 2.3,
			alpha: 1,
			streamName: 'Carapace'
		});
		const row = (code: string) =>
			shown?.outlook?.rows.find(({ telescopeCode }) => telescopeCode === code);
		expect(row('ALM')).toMatchObject({ whyNot: null, forbidden: null });
		// At 82° N a declination of −10° culminates at −2°, 27° short of the limit of 25°.
		expect(row('FAR')?.forbidden?.limit).toBe('altitude');
		expect(row('FAR')?.forbidden?.missingDeg).toBeCloseTo(27, 0);
		expect(row('FAR')?.whyNot).toMatch(/^never high enough, at best 2[67]\.\d° too low at/);
		const telescope = board.telescopes.find(({ code }) => code === 'ALM');
		expect(telescope?.limits).toMatchObject({ sunAltMaxDeg: -12, hasHorizon: false });
		expect(telescope?.depth).toMatchObject({ filter: 'R', refLimitMag: 21 });
	});
});
