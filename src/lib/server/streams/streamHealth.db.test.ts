import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circlePacket, NIGHT, openWorld, type World } from '../../../../tests/database/world';
import { handAlertSchema } from '../../domain/handAlert';
import type { Actor } from '../actor';
import { stream } from '../db/schema/alerts';
import { submitAlert } from '../packets/submitAlertService';
import { networkNotices, streamHealth } from './streamHealthService';
import type { AuthenticatedStream } from './streamKeyService';
import { retireStream } from './streamService';

let world: World;
let gamma: AuthenticatedStream;
let steward: Actor;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	steward = await world.person('steward', 'duty');
	await world.app.database.update(stream).set({ createdAt: NIGHT });
});
afterAll(() => world.close());

const send = (packetId: string, lagS: number, more: Record<string, unknown> = {}) =>
	world.receive(
		gamma,
		circlePacket({ packetId, t0: new Date(+world.app.now() - lagS * 1000).toISOString(), ...more })
	);

describe('how a stream fares', () => {
	it('is empty for one that sent nothing', async () => {
		const health = await streamHealth(world.app, steward, 'tambour');
		expect(health.days).toHaveLength(14);
		expect(health.days.at(-1)).toEqual({ day: '2026-12-01', packets: 0, errors: 0 });
		expect(health).toMatchObject({ medianLagS: null, lagPackets: 0, quietMs: 0 });
	});

	it('counts packets and errors by the UTC day and takes the median of its own observations', async () => {
		await send('TB-a', 10);
		await send('TB-b', 40);
		// Neither a test nor what a person enters says how fast the stream is.
		await send('TB-test', 5000, { role: 'test' });
		await submitAlert(
			world.app,
			steward,
			handAlertSchema.parse({
				submission: crypto.randomUUID(),
				stream: 'tambour',
				t0: '2026-11-30 03:00:00',
				position: '200 40',
				radius: '3',
				containment: '90'
			})
		);
		world.tick(86_400);
		await send('TB-c', 100);
		await expect(send('TB-d', -7200)).rejects.toMatchObject({ code: 'invalid' });
		const health = await streamHealth(world.app, steward, 'tambour');
		expect(health.days.slice(-2)).toEqual([
			{ day: '2026-12-01', packets: 4, errors: 0 },
			{ day: '2026-12-02', packets: 1, errors: 1 }
		]);
		expect(health).toMatchObject({ lagPackets: 3 });
		expect(health.medianLagS).toBeCloseTo(40, 6);
		world.tick(29.5 * 86_400);
		const later = await streamHealth(world.app, steward, 'tambour');
		expect(later).toMatchObject({ lagPackets: 1, quietMs: 29.5 * 86_400_000 });
		expect(later.medianLagS).toBeCloseTo(100, 6);
	});

	it('shows what waits in quarantine to stewards only, and expects nothing of a retired stream', async () => {
		const observer = await world.person('observer');
		expect((await networkNotices(world.app, steward)).quarantined).toBe(1);
		expect((await networkNotices(world.app, observer)).quarantined).toBeNull();
		await retireStream(world.app, steward, 'tambour', true);
		expect((await streamHealth(world.app, steward, 'tambour')).quietMs).toBeNull();
		await expect(streamHealth(world.app, null, 'tambour')).rejects.toMatchObject({
			code: 'notSignedIn'
		});
		await expect(streamHealth(world.app, steward, 'nobody')).rejects.toMatchObject({
			code: 'notFound'
		});
		expect(await world.app.database.$count(stream, eq(stream.code, 'tambour'))).toBe(1);
	});
});
