import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/actor';
import { alert } from '../../src/lib/server/db/schema/alerts';
import type { AuthenticatedStream } from '../../src/lib/server/streams/streamKeyService';
import { pixelAt } from '../../src/lib/sky/healpix/healpix';
import { mocAreaDeg2 } from '../../src/lib/sky/moc/moc';
import { GET } from '../../src/routes/api/v1/alerts/[id=uuid]/overlapping/+server';
import { circle, circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

const centre = { raDeg: 83.4, decDeg: -8.2 };
/** One pixel of order 5 (1.8° wide) that holds a position. */
const pixelOf = (raDeg: number, decDeg: number) => 4 * 4 ** 5 + pixelAt(5, { raDeg, decDeg });

/** Alerts on different days, so that each starts a transient of its own. */
const SHAPES: [packetId: string, shape: Record<string, unknown>][] = [
	['circle', circle(83.4, -8.2, 1)],
	['hardCircle', { kind: 'hardCircle', centre, radiusDeg: 1 }],
	[
		'ellipse',
		{
			kind: 'ellipse',
			centre,
			semiMajorDeg: 2,
			semiMinorDeg: 1,
			positionAngleDeg: 30,
			containment: 0.9
		}
	],
	[
		'annulus',
		{
			kind: 'annulus',
			centre: { raDeg: 83.4, decDeg: 31.8 },
			radiusDeg: 40,
			halfWidthDeg: 0.5,
			containment: 0.9
		}
	],
	[
		'polygon',
		{
			kind: 'polygon',
			vertices: [
				{ raDeg: 82, decDeg: -9 },
				{ raDeg: 85, decDeg: -9 },
				{ raDeg: 83.4, decDeg: -7 }
			]
		}
	],
	['map', { kind: 'map', uniq: [pixelOf(83.4, -8.2), pixelOf(200, 40)], density: [1, 1] }],
	['far', circle(200, 40, 0.5)]
];

let world: World;
let duty: Actor;
let gamma: AuthenticatedStream;
const ids = new Map<string, string>();

beforeAll(async () => {
	world = await openWorld();
	duty = await world.person('duty');
	gamma = await world.stream('tambour', 'gamma');
	for (const [i, [packetId, shape]] of SHAPES.entries()) {
		const t0 = `2026-11-0${i + 1}T03:00:00Z`;
		const { receipt } = await world.receive(gamma, circlePacket({ packetId, t0, shape }));
		ids.set(packetId, receipt.alertId);
	}
});
afterAll(() => world.close());

async function overlapping(id: string, actor: Actor | null = duty) {
	const event = routeEvent(world.app, {
		path: `/api/v1/alerts/${id}/overlapping`,
		params: { id },
		actor
	});
	const response = await GET(event as unknown as Parameters<typeof GET>[0]);
	const body = (await response.json()) as { alerts: { packetId: string }[] | null };
	return { status: response.status, found: body.alerts?.map(({ packetId }) => packetId).sort() };
}

const moc90Of = async (packetId: string) =>
	(
		await world.app.database
			.select({ moc90: alert.moc90 })
			.from(alert)
			.where(eq(alert.id, ids.get(packetId)!))
	)[0]!.moc90;

describe('GET /api/v1/alerts/{id}/overlapping', () => {
	const near = ['annulus', 'circle', 'ellipse', 'hardCircle', 'map', 'polygon'];
	const besides = (packetId: string) => near.filter((other) => other !== packetId);

	it('is told of circles at once, of the other shapes once the job has run', async () => {
		expect(await moc90Of('circle')).not.toBeNull();
		expect(await moc90Of('map')).toBeNull();
		expect((await overlapping(ids.get('map')!)).found).toEqual(['circle', 'far', 'hardCircle']);
		expect(await world.runJobs()).toContain('alert.fillSky');
		for (const [packetId] of SHAPES) expect(await moc90Of(packetId)).not.toBeNull();
		expect(mocAreaDeg2((await moc90Of('polygon'))!)).toBeCloseTo(3 * 0.9, 0);
	});

	it.each(near.filter((packetId) => packetId !== 'map'))(
		'finds all shapes that touch the %s',
		async (packetId) => {
			expect(await overlapping(ids.get(packetId)!)).toEqual({
				status: 200,
				found: besides(packetId)
			});
		}
	);

	it('finds what touches either patch of a map', async () => {
		expect((await overlapping(ids.get('map')!)).found).toEqual([...besides('map'), 'far'].sort());
		expect((await overlapping(ids.get('far')!)).found).toEqual(['map']);
	});

	it('fills in alerts of earlier versions', async () => {
		await world.app.database
			.update(alert)
			.set({ moc90: null })
			.where(eq(alert.id, ids.get('ellipse')!));
		const { fillAlertSky } = await import('../../src/lib/server/alerts/alertSky');
		await fillAlertSky(world.app);
		expect((await moc90Of('ellipse'))!.length).toBeGreaterThan(10);
	});

	it('answers 404 for no such alert and refuses partners', async () => {
		const nobody = '00000000-0000-4000-8000-000000000000';
		expect((await overlapping(nobody)).status).toBe(404);
		const partner = await world.person('partner');
		expect((await overlapping(ids.get('map')!, partner)).status).toBe(403);
	});
});
