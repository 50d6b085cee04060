import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { routeEvent } from '../../../../tests/http/callRoute';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import { GET } from '../../../routes/api/v1/transients/+server';
import { coneMoc } from '../../sky/moc/coneMoc';
import type { Actor } from '../actor';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { listTransients } from './transientList';
import { alertsOverlapping, overlappingRows, touchingRows, transientsTouching } from './skySearch';

let world: World;
let duty: Actor;
let gamma: AuthenticatedStream;
const found = new Map<string, { designation: string; alertId: string }>();

/** One alert a day, so that each starts a transient of its own. */
const CIRCLES = {
	orion: [circle(83.4, -8.2, 3), '2026-11-01'],
	seam: [circle(359.5, 10, 1), '2026-11-02'],
	pole: [circle(40, 89.2, 1), '2026-11-03'],
	arcsecond: [circle(150, 30, 1 / 3600), '2026-11-04'],
	orionAgain: [circle(87, -8.2, 1), '2026-11-05']
} as const;
const ARCSEC = 1 / 3600;

beforeAll(async () => {
	world = await openWorld();
	duty = await world.person('duty');
	gamma = await world.stream('tambour', 'gamma');
	for (const [name, [shape, day]] of Object.entries(CIRCLES)) {
		const t0 = `${day}T03:00:00Z`;
		const { receipt } = await world.receive(gamma, circlePacket({ packetId: name, t0, shape }));
		found.set(name, receipt);
	}
});
afterAll(() => world.close());

const designation = (name: keyof typeof CIRCLES) => found.get(name)!.designation;

async function touching(raDeg: number, decDeg: number, radiusDeg: number, credible?: 50 | 90) {
	const all = await transientsTouching(world.app, duty, { raDeg, decDeg, radiusDeg, credible });
	return all.map((item) => item.designation);
}

describe('transients that touch a patch', () => {
	it('are those whose 90 % region overlaps it, newest first', async () => {
		// 85.7° is 2.3° from the one centre and 1.3° from the other.
		expect(await touching(85.7, -8.2, 0.5)).toEqual([
			designation('orionAgain'),
			designation('orion')
		]);
		expect(await touching(81, -8.2, 0.1)).toEqual([designation('orion')]);
		expect(await touching(81, -8.2, 0)).toEqual([designation('orion')]);
	});
	it('are none where no region is near', async () => {
		expect(await touching(200, -50, 5)).toEqual([]);
		// The circle ends 3° south of its centre; the cells reach 0.13° further at most.
		expect(await touching(83.4, -11.6, 0.2)).toEqual([]);
	});
	it('are found by the half area when that is asked for', async () => {
		// 90 % in 3° means 50 % in 3° × 1.1774 / 2.1460 = 1.65°.
		expect(await touching(83.4, -10.4, 0.1, 90)).toEqual([designation('orion')]);
		expect(await touching(83.4, -10.4, 0.1, 50)).toEqual([]);
		expect(await touching(83.4, -9.6, 0.1, 50)).toEqual([designation('orion')]);
	});
	it('are found across right ascension 0, from either side', async () => {
		expect(await touching(0.3, 10, 0.1)).toEqual([designation('seam')]);
		expect(await touching(360, 10, 0.1)).toEqual([designation('seam')]);
		expect(await touching(358.7, 10, 0.1)).toEqual([designation('seam')]);
		expect(await touching(2, 10, 0.1)).toEqual([]);
	});
	it('are found over the pole', async () => {
		// 89.9° on the far side is 0.9° from the centre at 89.2°.
		expect(await touching(220, 89.9, 0.05)).toEqual([designation('pole')]);
		expect(await touching(220, 89, 0.05)).toEqual([]);
		expect(await touching(220, 89, 1)).toEqual([designation('pole')]);
	});
	it('are found at arcseconds', async () => {
		expect(await touching(150, 30, ARCSEC)).toEqual([designation('arcsecond')]);
		expect(await touching(150, 30 + 3 * ARCSEC, 0.5 * ARCSEC)).toEqual([]);
		expect(await touching(150, 30 + 3 * ARCSEC, 2.5 * ARCSEC)).toEqual([designation('arcsecond')]);
	});
	it('are all of them for the whole sky', async () => {
		expect(await touching(0, 0, 180)).toHaveLength(5);
	});
	it('say how far their centre is', async () => {
		const patch = { raDeg: 83.4, decDeg: -9.2, radiusDeg: 0.1 };
		const [only] = await transientsTouching(world.app, duty, patch);
		expect(only).toMatchObject({ designation: designation('orion'), state: 'open' });
		expect(only!.centre.decDeg).toBeCloseTo(-8.2, 9);
		expect(only!.separationDeg).toBeCloseTo(1, 9);
	});
	it('are sought by the latest region only', async () => {
		const t0 = '2026-11-06T03:00:00Z';
		const wide = circlePacket({ packetId: 'shrinks', t0, shape: circle(300, 0, 5) });
		const { receipt } = await world.receive(gamma, wide);
		expect(await touching(304, 0, 0.1)).toEqual([receipt.designation]);
		const better = { serial: 2, kind: 'update', shape: circle(300, 0, 0.5) };
		await world.receive(gamma, { ...wide, ...better });
		expect(await touching(304, 0, 0.1)).toEqual([]);
		expect(await touching(300, 0, 0.1)).toEqual([receipt.designation]);
	});
	it('can be listed with the other filters', async () => {
		const patch = { raDeg: 85.7, decDeg: -8.2, radiusDeg: 0.5 };
		const listed = async (search: string) =>
			(await listTransients(world.app, duty, { patch, search })).items.map(
				(item) => item.designation
			);
		expect(await listed('')).toEqual([designation('orionAgain'), designation('orion')]);
		expect(await listed(designation('orion'))).toEqual([designation('orion')]);
		expect(await listed(designation('pole'))).toEqual([]);
	});
	it('are not shown to partners', async () => {
		const partner = await world.person('partner');
		const patch = { raDeg: 0, decDeg: 0, radiusDeg: 1 };
		await expect(transientsTouching(world.app, partner, patch)).rejects.toMatchObject({
			code: 'notAllowed'
		});
	});
});

describe('GET /api/v1/transients', () => {
	async function get(query: string) {
		const event = routeEvent(world.app, { path: `/api/v1/transients?${query}`, actor: duty });
		return GET(event as unknown as Parameters<typeof GET>[0]);
	}
	it('answers with the transients that touch the patch', async () => {
		const answer = await get('ra=81&dec=-8.2&radius=0.1');
		expect(answer.status).toBe(200);
		expect(await answer.json()).toMatchObject({
			transients: [{ designation: designation('orion') }]
		});
	});
	it('names each field that is missing or out of range', async () => {
		const answer = await get('ra=400&dec=x&credible=70');
		expect(answer.status).toBe(422);
		expect(answer.headers.get('content-type')).toBe('application/problem+json');
		const { errors } = (await answer.json()) as { errors: { pointer: string }[] };
		expect(errors.map(({ pointer }) => pointer)).toEqual(['/ra', '/dec', '/radius', '/credible']);
	});
});

describe('alerts that overlap one', () => {
	const overlapping = async (name: keyof typeof CIRCLES) =>
		(await alertsOverlapping(world.app, duty, found.get(name)!.alertId))?.map(
			({ packetId }) => packetId
		);
	it('are those whose own 90 % area has sky in common with it, in any transient', async () => {
		expect(await overlapping('orion')).toEqual(['orionAgain']);
		expect(await overlapping('orionAgain')).toEqual(['orion']);
		expect(await overlapping('pole')).toEqual([]);
	});
	it('can’t be told of a retraction, which has no area', async () => {
		const { receipt } = await world.receive(gamma, {
			packetId: 'withdrawn',
			serial: 1,
			role: 'observation',
			kind: 'retraction',
			t0: '2026-11-09T03:00:00Z',
			cites: [{ stream: 'tambour', packetId: 'unheard', relation: 'retraction' }]
		});
		expect(await alertsOverlapping(world.app, duty, receipt.alertId)).toBeNull();
	});
	it('can’t be told of an alert that is not there', async () => {
		const nobody = '00000000-0000-4000-8000-000000000000';
		await expect(alertsOverlapping(world.app, duty, nobody)).rejects.toMatchObject({
			code: 'notFound'
		});
	});
});

describe('the indexes', () => {
	const cone = coneMoc({ raDeg: 83.4, decDeg: -8.2 }, 1);
	const nobody = '00000000-0000-4000-8000-000000000000';
	it('can serve both searches', async () => {
		await world.app.database.transaction(async (tx) => {
			await tx.execute(sql`set local enable_seqscan = off`);
			const plan = async (query: { getSQL: () => ReturnType<typeof sql> }) =>
				JSON.stringify((await tx.execute(sql`explain ${query.getSQL()}`)).rows);
			expect(await plan(touchingRows(tx, cone, 90))).toContain('region_moc90');
			expect(await plan(touchingRows(tx, cone, 50))).toContain('region_moc90');
			expect(await plan(overlappingRows(tx, nobody, cone))).toContain('alert_moc90');
		});
	});
});
