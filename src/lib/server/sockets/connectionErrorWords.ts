import { FrameError } from './vtpFrames';

/** A connection that this side gave up, with the reason in words. */
export class SocketError extends Error {
	override name = 'SocketError';
}

const WORDS: Record<string, string> = {
	ECONNREFUSED: 'Nothing listens at this address and port',
	ECONNRESET: 'The broker cut the connection',
	EPIPE: 'The broker cut the connection',
	ENOTFOUND: 'There is no such host',
	EAI_AGAIN: 'The host’s name can’t be looked up at the moment',
	EHOSTUNREACH: 'The host can’t be reached',
	ENETUNREACH: 'The host can’t be reached',
	ETIMEDOUT: 'The host does not answer'
};

/** Why a connection ended, as a steward reads it. */
export function connectionErrorWords(error: unknown): string {
	if (error instanceof SocketError || error instanceof FrameError) return error.message;
	// Where a name has several addresses, each one's failure is in a list.
	const first: unknown = error instanceof AggregateError ? error.errors[0] : error;
	const { code, message } = first as { code?: unknown; message?: unknown };
	if (typeof code === 'string' && WORDS[code]) return WORDS[code];
	return `The connection failed: ${String(message ?? code ?? first)}`.slice(0, 300);
}
