import { asc } from 'drizzle-orm';
import { afterAll, beforeAll, expect, it, vi } from 'vitest';
import { startVoeventBroker, type VoeventBroker } from '../../../../fakes/voeventBroker';
import { circlePacket, openWorld, type World } from '../../../../tests/database/world';
import { alert, packet } from '../db/schema/alerts';
import { takeIn } from '../packets/takeInService';
import { keepConnected } from './brokerConnection';
import { SOCKET_TIMINGS } from './socketTimings';

let world: World;
let broker: VoeventBroker;

beforeAll(async () => {
	world = await openWorld();
	broker = await startVoeventBroker({ vtpPort: 0, httpPort: 0, aliveEveryMs: 30 });
});
afterAll(async () => {
	await broker.close();
	await world.close();
});

it('makes one alert of a packet that is kept, cut off before its acknowledgment and sent again', async () => {
	const { stream } = await world.stream('carapace', 'wideXray');
	const body = Buffer.from(JSON.stringify(circlePacket({ packetId: 'CP-1' })));
	const stop = new AbortController();
	let cuts = 0;
	const done = keepConnected(
		{
			host: '127.0.0.1',
			port: broker.port,
			identity: 'ivo://duskline.example/duskline',
			ivornPrefix: '',
			// In place of the VOEvent a packet of the same meaning whose reader stands by itself.
			take: async () => {
				await takeIn(world.app, stream, {
					body,
					contentType: 'application/json',
					channel: 'socket'
				});
				if (cuts++ === 0) broker.cut();
			},
			onConnected: () => undefined,
			onMessage: () => undefined,
			onBroken: () => undefined,
			timings: { ...SOCKET_TIMINGS, firstRetryMs: 10 },
			now: world.app.now
		},
		stop.signal
	);
	broker.post('<VOEvent version="2.0" ivorn="ivo://carapace.example/alerts#CP-1"/>');
	await vi.waitFor(() => expect(broker.events()[0]).toMatchObject({ state: 'acked', sends: 2 }), {
		timeout: 5000
	});
	stop.abort();
	await done;
	const kept = await world.app.database.select().from(packet).orderBy(asc(packet.id));
	expect(kept.map(({ state, channel }) => [state, channel])).toEqual([
		['taken', 'socket'],
		['copy', 'socket']
	]);
	expect(await world.app.database.$count(alert)).toBe(1);
});
