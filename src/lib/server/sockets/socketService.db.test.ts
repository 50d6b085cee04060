import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openWorld, type World } from '../../../../tests/database/world';
import { socketState } from '../../domain/streamSocket';
import type { Actor } from '../actor';
import { streamBroker } from '../db/schema/alerts';
import { takeBrokerLock } from './brokerLock';
import { addSocket, listSockets, removeSocket, switchSocket } from './socketService';

let world: World;
let steward: Actor;
let duty: Actor;

beforeAll(async () => {
	world = await openWorld();
	steward = await world.person('steward');
	duty = await world.person('duty');
	await world.stream('carapace', 'wideXray');
	await world.stream('tambour', 'gamma');
});
afterAll(() => world.close());

const input = (host: string, port = 8099) => ({ host, port, ivornPrefix: '' });
const add = (host: string, code = 'carapace') => addSocket(world.app, steward, code, input(host));
const list = (code = 'carapace') => listSockets(world.app, duty, code);

describe('a stream’s sockets', () => {
	it('are added once for each address, switched and removed, each under its own stream', async () => {
		const { id } = await add('broker.example');
		await expect(add('broker.example')).rejects.toMatchObject({
			code: 'nameTaken',
			errors: [{ pointer: '/host' }]
		});
		await add('broker.example', 'tambour');
		expect(await list()).toMatchObject([{ id, host: 'broker.example', port: 8099, enabled: true }]);
		await switchSocket(world.app, steward, 'carapace', { socketId: id, enabled: false });
		expect((await list())[0]!.enabled).toBe(false);
		await expect(
			switchSocket(world.app, steward, 'tambour', { socketId: id, enabled: true })
		).rejects.toMatchObject({ code: 'notFound' });
		await removeSocket(world.app, steward, 'tambour', id);
		expect(await list()).toHaveLength(1);
		await removeSocket(world.app, steward, 'carapace', id);
		await removeSocket(world.app, steward, 'carapace', id);
		expect(await list()).toEqual([]);
		expect(await list('tambour')).toHaveLength(1);
		await expect(add('broker.example', 'nobody')).rejects.toMatchObject({ code: 'notFound' });
	});

	it('are changed by stewards only', async () => {
		const { id } = await add('guarded.example');
		const refused = { code: 'notAllowed' };
		const { app } = world;
		await expect(addSocket(app, duty, 'carapace', input('a.example'))).rejects.toMatchObject(
			refused
		);
		await expect(
			switchSocket(app, duty, 'carapace', { socketId: id, enabled: false })
		).rejects.toMatchObject(refused);
		await expect(removeSocket(app, duty, 'carapace', id)).rejects.toMatchObject(refused);
		await expect(listSockets(app, null, 'carapace')).rejects.toMatchObject({
			code: 'notSignedIn'
		});
	});

	it('are connected only while somebody holds them, whatever was written last', async () => {
		const { id } = await add('held.example');
		const state = async () => socketState((await list()).find((socket) => socket.id === id)!);
		const { database } = world.app;
		expect(await state()).toBe('waiting');
		const lock = await takeBrokerLock(world.app.config.databaseUrl, id);
		expect(await takeBrokerLock(world.app.config.databaseUrl, id)).toBeNull();
		expect(await state()).toBe('connecting');
		const connectedAt = world.app.now();
		await database.update(streamBroker).set({ connectedAt }).where(eq(streamBroker.id, id));
		expect(await state()).toBe('connected');
		await lock!.release();
		expect(await state()).toBe('waiting');
		await switchSocket(world.app, steward, 'carapace', { socketId: id, enabled: false });
		expect(await state()).toBe('off');
	});
});
