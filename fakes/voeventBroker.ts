import { once } from 'node:events';
import type { IncomingMessage } from 'node:http';
import { createServer, type AddressInfo, type Socket } from 'node:net';
import { readSocketMessage, writeTransport } from '../src/lib/server/sockets/transportMessage';
import { frameOf, FrameReader } from '../src/lib/server/sockets/vtpFrames';
import { readBody, readJson, RequestError, serveLoopback, type Answer } from './loopbackServer';
import { closeOnSignal, isMain, portFrom } from './runAsProcess';
import { brokerPage } from './voeventBrokerPage';

/** A VOEvent handed to the broker, and how far it has come. */
export type BrokeredEvent = {
	id: number;
	ivorn: string;
	postedAt: string;
	state: 'waiting' | 'sent' | 'acked' | 'naked';
	/** How often it was written to a subscriber. */
	sends: number;
	answeredAt: string | null;
	/** What the subscriber gave as a reason. */
	result: string;
};

/** How the broker fails on purpose: `silent` says nothing at all, `refuse` cuts every connection. */
export type BrokerFailure = 'off' | 'silent' | 'refuse';

export type VoeventBroker = {
	/** Of the VOEvent Transport Protocol, on 127.0.0.1. */
	port: number;
	/** Of the page and the JSON API. */
	url: string;
	post: (xml: string) => BrokeredEvent;
	events: () => BrokeredEvent[];
	/** Answers to iamalive since the start. */
	alive: () => number;
	subscribers: () => number;
	fail: (mode: BrokerFailure) => void;
	/** Cuts every connection once, in the middle of whatever is going on. */
	cut: () => void;
	close: () => Promise<void>;
};

const IDENTITY = 'ivo://broker.example/demo';
const FAILURES: BrokerFailure[] = ['off', 'silent', 'refuse'];
const KEPT_EVENTS = 500;
const LARGEST_EVENT_BYTES = 1024 * 1024;

/**
 * Starts a broker of the VOEvent Transport Protocol for this machine: it says that it is alive, sends what is
 * posted to it, and sends again after a break what no subscriber has acknowledged.
 */
export async function startVoeventBroker(options: {
	vtpPort: number;
	httpPort: number;
	aliveEveryMs?: number;
}): Promise<VoeventBroker> {
	const sockets = new Set<Socket>();
	let kept: { event: BrokeredEvent; body: Buffer }[] = [];
	let failure: BrokerFailure = 'off';
	let count = 0;
	let aliveAnswers = 0;

	const sayAlive = (socket: Socket) => {
		if (failure === 'silent') return;
		const document = { role: 'iamalive' as const, origin: IDENTITY, response: '', at: new Date() };
		socket.write(frameOf(writeTransport(document)));
	};
	const sendTo = (socket: Socket, { event, body }: (typeof kept)[number]) => {
		if (failure === 'silent') return;
		event.sends += 1;
		event.state = 'sent';
		socket.write(frameOf(body));
	};
	const hear = (body: Buffer) => {
		const read = readSocketMessage(body);
		if (read.kind !== 'transport') return;
		const { role, origin, response, result } = read.message;
		if (response === '') return;
		if (role === 'iamalive' && origin === IDENTITY) aliveAnswers += 1;
		if (role !== 'ack' && role !== 'nak') return;
		const answered = kept.find(({ event }) => event.state === 'sent' && event.ivorn === origin);
		if (!answered) return;
		answered.event.state = role === 'ack' ? 'acked' : 'naked';
		answered.event.answeredAt = new Date().toISOString();
		answered.event.result = result;
	};

	const server = createServer((socket) => {
		// A subscriber that goes away in mid-sentence is its own affair.
		socket.on('error', () => undefined);
		if (failure === 'refuse') return void socket.destroy();
		sockets.add(socket);
		socket.once('close', () => sockets.delete(socket));
		const frames = new FrameReader();
		socket.on('data', (chunk: Buffer) => {
			try {
				for (const body of frames.read(chunk)) hear(body);
			} catch {
				socket.destroy();
			}
		});
		sayAlive(socket);
		for (const item of kept) if (item.event.state !== 'acked') sendTo(socket, item);
	});
	server.listen(options.vtpPort, '127.0.0.1');
	await once(server, 'listening');
	const beat = setInterval(() => sockets.forEach(sayAlive), options.aliveEveryMs ?? 15_000);

	const post = (xml: string): BrokeredEvent => {
		const body = Buffer.from(xml, 'utf8');
		const read = readSocketMessage(body);
		if (body.length === 0 || read.kind === 'transport') {
			throw new RequestError(400, 'POST a VOEvent');
		}
		count += 1;
		const event: BrokeredEvent = {
			id: count,
			ivorn: read.ivorn ?? '',
			postedAt: new Date().toISOString(),
			state: 'waiting',
			sends: 0,
			answeredAt: null,
			result: ''
		};
		const item = { event, body };
		kept = [...kept, item].slice(-KEPT_EVENTS);
		for (const socket of sockets) sendTo(socket, item);
		return event;
	};
	const cut = () => sockets.forEach((socket) => socket.destroy());
	const fail = (mode: BrokerFailure) => {
		failure = mode;
		if (mode === 'refuse') cut();
	};
	const events = () => kept.map(({ event }) => ({ ...event }));

	const control = async (request: IncomingMessage, url: URL): Promise<Answer> => {
		switch (`${request.method} ${url.pathname}`) {
			case 'GET /':
				return {
					status: 200,
					headers: { 'Content-Type': 'text/html; charset=utf-8' },
					body: brokerPage(events().reverse(), sockets.size)
				};
			case 'GET /api/events':
				return { status: 200, json: { subscribers: sockets.size, events: events() } };
			case 'POST /api/events': {
				const body = await readBody(request, LARGEST_EVENT_BYTES);
				return { status: 202, json: post(body.toString('utf8')) };
			}
			case 'POST /api/cut':
				cut();
				return { status: 204 };
			case 'POST /api/fail': {
				const { mode } = await readJson(request);
				const wanted = FAILURES.find((known) => known === mode);
				if (!wanted) throw new RequestError(400, `mode must be one of ${FAILURES.join(', ')}`);
				fail(wanted);
				return { status: 200, json: { mode: wanted } };
			}
			default:
				return { status: 404, json: { error: 'Nothing here' } };
		}
	};
	const web = await serveLoopback(control, options.httpPort);

	return {
		port: (server.address() as AddressInfo).port,
		url: web.origin,
		post,
		events,
		alive: () => aliveAnswers,
		subscribers: () => sockets.size,
		fail,
		cut,
		close: async () => {
			clearInterval(beat);
			const closed = once(server, 'close');
			server.close();
			cut();
			await Promise.all([closed, web.close()]);
		}
	};
}

if (isMain(import.meta.url)) {
	const broker = await startVoeventBroker({
		vtpPort: portFrom('DUSKLINE_BROKER_PORT'),
		httpPort: portFrom('DUSKLINE_BROKER_PAGE_PORT')
	});
	closeOnSignal(broker.close);
	console.log(`VOEvent broker: 127.0.0.1:${broker.port}, what it sent: ${broker.url}`);
}
