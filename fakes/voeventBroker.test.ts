import { connect, type Socket } from 'node:net';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { startVoeventBroker, type BrokeredEvent, type VoeventBroker } from './voeventBroker';

const EVENT = '<VOEvent version="2.0" ivorn="ivo://carapace.example/alerts#CP-1"/>';

let broker: VoeventBroker;
let socket: Socket;
/** All that the broker has written, lengths included, byte for character. */
let heard = '';

beforeEach(async () => {
	broker = await startVoeventBroker({ vtpPort: 0, httpPort: 0, aliveEveryMs: 20 });
	subscribe();
});
afterEach(async () => {
	socket.destroy();
	await broker.close();
});

function subscribe(): void {
	heard = '';
	socket = connect(broker.port, '127.0.0.1');
	socket.on('data', (chunk: Buffer) => (heard += chunk.toString('latin1')));
}

/** Writes a document by hand: the length before it, in four bytes. */
function say(xml: string): void {
	socket.write(Buffer.from([0, 0, xml.length >> 8, xml.length & 255]));
	socket.write(xml);
}

const answer = (role: string, result = '') =>
	say(`<Transport role="${role}" version="1.0"><Origin>ivo://carapace.example/alerts#CP-1</Origin>
<Response>ivo://a.example/b</Response><TimeStamp>2026-12-01T04:12:40Z</TimeStamp>
<Meta><Result>${result}</Result></Meta></Transport>`);

async function api(method: string, path: string, body?: string) {
	const response = await fetch(`${broker.url}/api/${path}`, { method, body });
	return { status: response.status, text: await response.text() };
}

const events = async () =>
	(JSON.parse((await api('GET', 'events')).text) as { events: BrokeredEvent[] }).events;

describe('the VOEvent broker', () => {
	it('says that it is alive, again and again, each time with the length before it', async () => {
		await vi.waitFor(() => expect(heard.split('role="iamalive"').length).toBeGreaterThan(3));
		const length = Buffer.from(heard.slice(0, 4), 'latin1').readUInt32BE();
		expect(heard.slice(4, 4 + length)).toMatch(/^<\?xml.*<\/trn:Transport>\s*$/s);
	});

	it('sends what is posted, and knows what was kept and what was not', async () => {
		expect(await api('POST', 'events', EVENT)).toMatchObject({ status: 202 });
		await vi.waitFor(() => expect(heard).toContain(EVENT));
		expect(await events()).toMatchObject([{ state: 'sent', sends: 1, answeredAt: null }]);
		answer('nak', 'No room');
		await vi.waitFor(async () =>
			expect(await events()).toMatchObject([{ state: 'naked', result: 'No room' }])
		);
		const page = await fetch(broker.url);
		expect(await page.text()).toContain('not kept by the subscriber');
	});

	it('sends again after a break until it is acknowledged, and not after', async () => {
		broker.post(EVENT);
		await vi.waitFor(() => expect(heard).toContain(EVENT));
		await api('POST', 'cut');
		await vi.waitFor(() => expect(socket.destroyed).toBe(true));
		subscribe();
		await vi.waitFor(() => expect(heard).toContain(EVENT));
		answer('ack');
		await vi.waitFor(async () =>
			expect(await events()).toMatchObject([{ state: 'acked', sends: 2 }])
		);
		socket.destroy();
		subscribe();
		await vi.waitFor(() => expect(heard).toContain('iamalive'));
		expect(heard).not.toContain(EVENT);
	});

	it('refuses what is no packet, and fails on purpose', async () => {
		expect(await api('POST', 'events', '')).toMatchObject({ status: 400 });
		expect(await api('POST', 'events', '<Transport role="ack"/>')).toMatchObject({ status: 400 });
		expect(await api('POST', 'fail', '{"mode":"sometimes"}')).toMatchObject({ status: 400 });
		expect(await api('POST', 'fail', '{"mode":"refuse"}')).toMatchObject({ status: 200 });
		await vi.waitFor(() => expect(socket.destroyed).toBe(true));
		await api('POST', 'fail', '{"mode":"silent"}');
		subscribe();
		await vi.waitFor(() => expect(broker.subscribers()).toBe(1));
		await new Promise((resolve) => setTimeout(resolve, 80));
		expect(heard).toBe('');
	});
});
