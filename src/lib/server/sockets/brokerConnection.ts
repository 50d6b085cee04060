import { once } from 'node:events';
import { connect, type Socket } from 'node:net';
import { setTimeout as delay } from 'node:timers/promises';
import { DomainError } from '../domainError';
import { connectionErrorWords, SocketError } from './connectionErrorWords';
import { retryDelayMs, type SocketTimings } from './socketTimings';
import { readSocketMessage, writeTransport, type Answer } from './transportMessage';
import { frameOf, FrameReader } from './vtpFrames';

export type BrokerConnectionParts = {
	host: string;
	port: number;
	/** Our own IVORN, in every answer. */
	identity: string;
	/** Packets whose IVORN does not start with it are acknowledged and left; empty: all are taken. */
	ivornPrefix: string;
	/**
	 * Keeps and judges a packet's body. A DomainError says that it was kept and refused; any other error
	 * that it may not have been kept.
	 */
	take: (body: Buffer) => Promise<unknown>;
	onConnected: () => void;
	/** A message of any kind came. */
	onMessage: () => void;
	/** The connection ended, or none came about; in words, null when it was ended on purpose. */
	onBroken: (reason: string | null) => void;
	timings: SocketTimings;
	now: () => Date;
};

/** Answers that a broker does not read are not collected past this. */
const MOST_UNREAD_BYTES = 256 * 1024;

/** Keeps one connection to a broker until aborted: connects, talks, and connects again after a break. */
export async function keepConnected(
	parts: BrokerConnectionParts,
	signal: AbortSignal
): Promise<void> {
	for (let failures = 0; !signal.aborted;) {
		const startedMs = performance.now();
		const reason = await converse(parts, signal);
		parts.onBroken(signal.aborted ? null : connectionErrorWords(reason));
		if (performance.now() - startedMs >= parts.timings.steadyAfterMs) failures = 0;
		await delay(retryDelayMs(failures, parts.timings), undefined, { signal }).catch(
			() => undefined
		);
		failures += 1;
	}
}

/** One connection from beginning to end; answers why it ended. */
async function converse(parts: BrokerConnectionParts, signal: AbortSignal): Promise<unknown> {
	if (signal.aborted) return null;
	const { silentAfterMs, connectWithinMs } = parts.timings;
	const socket = connect({ host: parts.host, port: parts.port, keepAlive: true, noDelay: true });
	const cut = () => socket.destroy();
	signal.addEventListener('abort', cut, { once: true });
	let watch = cutLater(socket, connectWithinMs, 'No connection');
	// Without a listener an error between two reads would end the process; reading reports it all the same.
	socket.on('error', () => undefined);
	try {
		await once(socket, 'connect', { signal });
		parts.onConnected();
		const frames = new FrameReader();
		clearTimeout(watch);
		watch = cutLater(socket, silentAfterMs, 'Nothing heard');
		// Read in step with the work: while a packet is kept, the broker's next ones wait in its own memory.
		for await (const chunk of socket as AsyncIterable<Buffer>) {
			for (const body of frames.read(chunk)) {
				clearTimeout(watch);
				parts.onMessage();
				const answer = await answerTo(parts, body);
				if (answer) send(socket, answer);
				watch = cutLater(socket, silentAfterMs, 'Nothing heard');
			}
		}
		throw new SocketError('The broker closed the connection');
	} catch (error) {
		return error;
	} finally {
		clearTimeout(watch);
		signal.removeEventListener('abort', cut);
		socket.destroy();
	}
}

function cutLater(socket: Socket, afterMs: number, what: string): NodeJS.Timeout {
	return setTimeout(
		() => socket.destroy(new SocketError(`${what} for ${Number((afterMs / 1000).toFixed(1))} s`)),
		afterMs
	);
}

function send(socket: Socket, answer: Buffer): void {
	if (socket.destroyed) return;
	socket.write(frameOf(answer));
	if (socket.writableLength > MOST_UNREAD_BYTES) {
		throw new SocketError('The broker does not read what is answered');
	}
}

async function answerTo(parts: BrokerConnectionParts, body: Buffer): Promise<Buffer | null> {
	if (body.length === 0) return null;
	const read = readSocketMessage(body);
	const answer = (role: Answer['role'], origin: string, result = '') =>
		writeTransport({ role, origin, response: parts.identity, at: parts.now(), result });
	if (read.kind === 'transport') {
		// `authenticate` asks who we are; a signature is the broker's wish, and we have none to give.
		const { role, origin } = read.message;
		return role === 'iamalive' || role === 'authenticate' ? answer(role, origin) : null;
	}
	const { ivorn } = read;
	if (ivorn !== null && !ivorn.startsWith(parts.ivornPrefix)) return answer('ack', ivorn);
	try {
		await parts.take(body);
		return answer('ack', ivorn ?? '');
	} catch (error) {
		if (error instanceof DomainError) {
			return answer('ack', ivorn ?? '', `Kept, but not taken as an alert: ${error.code}`);
		}
		return answer('nak', ivorn ?? '', 'It could not be kept; send it again later');
	}
}
