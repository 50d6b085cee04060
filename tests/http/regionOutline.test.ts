import { geoContains } from 'd3-geo';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { RegionOutline, Rings } from '../../src/lib/domain/regionOutline';
import type { Actor } from '../../src/lib/server/actor';
import { GET } from '../../src/routes/api/v1/transients/[designation=designation]/region/+server';
import { circle, circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

let world: World;
let duty: Actor;
let designation: string;

beforeAll(async () => {
	world = await openWorld();
	duty = await world.person('duty');
	const gamma = await world.stream('tambour', 'gamma');
	const ring = {
		kind: 'annulus',
		centre: { raDeg: 355, decDeg: 10 },
		radiusDeg: 20,
		halfWidthDeg: 2,
		containment: 0.9
	} as const;
	const { receipt } = await world.receive(gamma, circlePacket({ shape: ring }));
	designation = receipt.designation;
});
afterAll(() => world.close());

async function get(query = '', headers: Record<string, string> = {}, actor = duty) {
	const path = `/api/v1/transients/${designation}/region${query}`;
	const event = routeEvent(world.app, { path, params: { designation }, actor, headers });
	return GET(event as unknown as Parameters<typeof GET>[0]);
}

function holds(rings: Rings, raDeg: number, decDeg: number): boolean {
	const coordinates = rings.map((ring) => ring.map((at) => [at.raDeg, at.decDeg]));
	return geoContains({ type: 'Polygon', coordinates }, [raDeg, decDeg]);
}

describe('GET /api/v1/transients/[designation]/region', () => {
	it('gives the outline of a ring with its hole, the half inside the nine tenths', async () => {
		const answer = await get();
		expect(answer.status).toBe(200);
		const { version, outline50, outline90 } = (await answer.json()) as RegionOutline;
		expect(version).toBe(1);
		expect(outline90).toHaveLength(2);
		for (const rings of [outline50, outline90]) {
			expect(holds(rings, 355, 30)).toBe(true);
			expect(holds(rings, 355, -10)).toBe(true);
			expect(holds(rings, 355, 10)).toBe(false);
			expect(holds(rings, 355, 40)).toBe(false);
		}
		// 1.6° off the middle of the ring: between the half (0.82°) and the nine tenths (2°).
		expect(holds(outline90, 355, 31.6)).toBe(true);
		expect(holds(outline50, 355, 31.6)).toBe(false);
	});

	it('answers 304 until the region changes; what it was can still be asked for', async () => {
		const etag = (await get()).headers.get('etag')!;
		expect((await get('', { 'if-none-match': `W/${etag}` })).status).toBe(304);
		const xray = await world.stream('carapace', 'wideXray');
		const { receipt } = await world.receive(
			xray,
			circlePacket({ packetId: 'later', shape: circle(355, 30, 1) })
		);
		expect(receipt.designation).toBe(designation);
		const changed = await get('', { 'if-none-match': etag });
		expect(changed.status).toBe(200);
		const now = (await changed.json()) as RegionOutline;
		expect(now.version).toBe(2);
		expect(holds(now.outline90, 355, 30)).toBe(true);
		expect(holds(now.outline90, 355, -10)).toBe(false);
		const before = (await (await get('?version=1')).json()) as RegionOutline;
		expect(holds(before.outline90, 355, -10)).toBe(true);
	});

	it('refuses versions that are none', async () => {
		expect((await get('?version=3')).status).toBe(404);
		for (const query of ['?version=0', '?version=x', '?version=1e9', '?serial=1']) {
			expect((await get(query)).status).toBe(422);
		}
	});
});
