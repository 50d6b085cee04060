import { createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { startVoeventBroker, type VoeventBroker } from '../../../../fakes/voeventBroker';
import { DomainError } from '../domainError';
import { keepConnected, type BrokerConnectionParts } from './brokerConnection';
import { retryDelayMs, SOCKET_TIMINGS } from './socketTimings';
import { readSocketMessage } from './transportMessage';
import { frameOf, FrameReader } from './vtpFrames';

const QUICK = { ...SOCKET_TIMINGS, firstRetryMs: 10, longestRetryMs: 40, silentAfterMs: 5000 };
const IDENTITY = 'ivo://duskline.example/duskline';

const ends: (() => Promise<unknown> | void)[] = [];
afterEach(async () => {
	for (const end of ends.splice(0).reverse()) await end();
});

function voevent(id: string, authority = 'carapace.example'): string {
	return `<voe:VOEvent xmlns:voe="http://www.ivoa.net/xml/VOEvent/v2.0" version="2.0"
		ivorn="ivo://${authority}/alerts#${id}" role="test"/>`;
}

/** Starts a connection that collects what it takes; it ends with the test. */
function connectTo(port: number, overrides: Partial<BrokerConnectionParts> = {}) {
	const taken: string[] = [];
	const broken: (string | null)[] = [];
	let connections = 0;
	const stop = new AbortController();
	const done = keepConnected(
		{
			host: '127.0.0.1',
			port,
			identity: IDENTITY,
			ivornPrefix: '',
			take: async (body) => void taken.push(body.toString()),
			onConnected: () => (connections += 1),
			onMessage: () => undefined,
			onBroken: (reason) => broken.push(reason),
			timings: QUICK,
			now: () => new Date(),
			...overrides
		},
		stop.signal
	);
	const end = async () => {
		stop.abort();
		await done;
	};
	ends.push(end);
	return { taken, broken, connections: () => connections, end };
}

describe('a connection to a broker', () => {
	let broker: VoeventBroker;
	beforeEach(async () => {
		broker = await startVoeventBroker({ vtpPort: 0, httpPort: 0, aliveEveryMs: 20 });
		ends.push(() => broker.close());
	});

	it('answers iamalive, takes each VOEvent byte for byte and acknowledges it', async () => {
		const { taken } = connectTo(broker.port);
		await vi.waitFor(() => expect(broker.alive()).toBeGreaterThan(2));
		const xml = [voevent('CP-1'), voevent('CP-2 ü'), voevent('CP-3')];
		xml.forEach(broker.post);
		await vi.waitFor(() =>
			expect(broker.events().map(({ state }) => state)).toEqual(['acked', 'acked', 'acked'])
		);
		expect(taken).toEqual(xml);
		expect(broker.events()[0]).toMatchObject({ sends: 1, result: '' });
	});

	it('acknowledges what was kept and refused, and what can’t be read at all', async () => {
		const { taken } = connectTo(broker.port, {
			take: async (body) => {
				taken.push(body.toString());
				throw new DomainError('malformedBody', 'No.');
			}
		});
		broker.post('<voe:VOEvent ivorn="ivo://cut.sho');
		broker.post(voevent('CP-1'));
		await vi.waitFor(() => expect(taken).toHaveLength(2));
		await vi.waitFor(() =>
			expect(broker.events().map(({ state }) => state)).toEqual(['acked', 'acked'])
		);
		expect(broker.events()[1]!.result).toContain('malformedBody');
	});

	it('says so when a packet could not be kept, and goes on', async () => {
		let away = true;
		const { taken } = connectTo(broker.port, {
			take: async (body) => {
				if (away) throw new Error('the database is away');
				taken.push(body.toString());
			}
		});
		broker.post(voevent('CP-1'));
		await vi.waitFor(() => expect(broker.events()[0]!.state).toBe('naked'));
		expect(broker.events()[0]!.result).not.toContain('database');
		away = false;
		broker.post(voevent('CP-2'));
		await vi.waitFor(() => expect(broker.events()[1]!.state).toBe('acked'));
		broker.cut();
		await vi.waitFor(() => expect(broker.events()[0]!.state).toBe('acked'));
		expect(taken).toEqual([voevent('CP-2'), voevent('CP-1')]);
	});

	it('acknowledges other authors’ packets and leaves them', async () => {
		const { taken } = connectTo(broker.port, { ivornPrefix: 'ivo://carapace.example/' });
		broker.post(voevent('X-1', 'other.example'));
		broker.post(voevent('CP-1'));
		broker.post('not XML, so nobody knows whose');
		await vi.waitFor(() =>
			expect(broker.events().map(({ state }) => state)).toEqual(['acked', 'acked', 'acked'])
		);
		expect(taken).toEqual([voevent('CP-1'), 'not XML, so nobody knows whose']);
	});

	it('connects again after a cut, and gets again what it had not acknowledged', async () => {
		let hold: (() => void) | null = null;
		const { taken, broken } = connectTo(broker.port, {
			take: async (body) => {
				taken.push(body.toString());
				if (taken.length === 1) await new Promise<void>((resolve) => (hold = resolve));
			}
		});
		broker.post(voevent('CP-1'));
		await vi.waitFor(() => expect(hold).not.toBeNull());
		broker.cut();
		broker.post(voevent('CP-2'));
		hold!();
		await vi.waitFor(() =>
			expect(broker.events().map(({ state }) => state)).toEqual(['acked', 'acked'])
		);
		expect(taken).toEqual([voevent('CP-1'), voevent('CP-1'), voevent('CP-2')]);
		expect(broken[0]).toMatch(/^The broker (cut|closed) the connection$/);
	});

	it('gives up a silent one and connects again', async () => {
		broker.fail('silent');
		const timings = { ...QUICK, silentAfterMs: 400 };
		const { broken, connections } = connectTo(broker.port, { timings });
		await vi.waitFor(() => expect(connections()).toBeGreaterThan(1));
		expect(broken[0]).toBe('Nothing heard for 0.4 s');
		broker.fail('off');
		await vi.waitFor(() => expect(broker.alive()).toBeGreaterThan(0));
		const before = connections();
		await new Promise((resolve) => setTimeout(resolve, 900));
		expect(connections()).toBe(before);
	});

	it('is not silent while a packet takes long to keep', async () => {
		const timings = { ...QUICK, silentAfterMs: 300 };
		const { broken } = connectTo(broker.port, {
			timings,
			take: () => new Promise((resolve) => setTimeout(resolve, 700))
		});
		broker.post(voevent('CP-1'));
		await vi.waitFor(() => expect(broker.events()[0]).toMatchObject({ state: 'acked', sends: 1 }), {
			timeout: 3000
		});
		expect(broken).toEqual([]);
	});

	it('comes back when the broker does, and ends for good when it is told to', async () => {
		broker.fail('refuse');
		const { connections, broken, end } = connectTo(broker.port);
		await vi.waitFor(() => expect(broken.length).toBeGreaterThan(2));
		broker.fail('off');
		await vi.waitFor(() => expect(broker.subscribers()).toBe(1));
		await end();
		expect(broken.at(-1)).toBeNull();
		await vi.waitFor(() => expect(broker.subscribers()).toBe(0));
		const before = connections();
		await new Promise((resolve) => setTimeout(resolve, 100));
		expect(connections()).toBe(before);
	});
});

describe('a broker that misbehaves', () => {
	async function serve(talk: (socket: Socket) => void): Promise<number> {
		const server: Server = createServer((socket) => {
			socket.on('error', () => undefined);
			ends.push(() => void socket.destroy());
			talk(socket);
		});
		await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
		ends.unshift(() => new Promise((resolve) => server.close(resolve)));
		return (server.address() as AddressInfo).port;
	}

	it('is left when it announces more than may be read', async () => {
		const port = await serve((socket) => socket.write(Buffer.from([1, 0, 0, 0, 60])));
		const { broken } = connectTo(port);
		await vi.waitFor(() => expect(broken.length).toBeGreaterThan(1));
		expect(broken[0]).toBe('A message of 16777216 bytes was announced; at most 1048576 are read');
	});

	it('is left when a message never ends, however it trickles', async () => {
		const port = await serve((socket) => {
			socket.write(Buffer.from([0, 0, 4, 0]));
			const drip = setInterval(() => socket.write('x'), 10);
			socket.once('close', () => clearInterval(drip));
		});
		const { broken } = connectTo(port, { timings: { ...QUICK, silentAfterMs: 100 } });
		await vi.waitFor(() => expect(broken[0]).toBe('Nothing heard for 0.1 s'));
	});

	it('may send empty messages and documents that want no answer', async () => {
		const answers: string[] = [];
		const port = await serve((socket) => {
			const frames = new FrameReader();
			socket.on('data', (chunk: Buffer) => {
				for (const body of frames.read(chunk)) {
					const read = readSocketMessage(body);
					if (read.kind === 'transport') answers.push(read.message.role);
				}
			});
			socket.write(frameOf(Buffer.alloc(0)));
			for (const role of ['ack', 'nak', 'newrole', 'authenticate', 'iamalive']) {
				socket.write(frameOf(Buffer.from(`<Transport role="${role}" version="1.0"/>`)));
			}
		});
		const { taken } = connectTo(port);
		await vi.waitFor(() => expect(answers).toEqual(['authenticate', 'iamalive']));
		expect(taken).toEqual([]);
	});

	it('that is not there is named in words', async () => {
		const port = await serve(() => undefined);
		await ends.shift()!();
		const { broken } = connectTo(port);
		await vi.waitFor(() => expect(broken.length).toBeGreaterThan(1));
		expect(broken[0]).toBe('Nothing listens at this address and port');
	});
});

describe('the waits between attempts', () => {
	it('double from one second to a minute and are drawn from their upper half', () => {
		const waits = (draw: number) =>
			[0, 1, 2, 5, 6, 50, 5000].map((n) => retryDelayMs(n, SOCKET_TIMINGS, () => draw) / 1000);
		expect(waits(1)).toEqual([1, 2, 4, 32, 60, 60, 60]);
		expect(waits(0)).toEqual([0.5, 1, 2, 16, 30, 30, 30]);
	});
});
