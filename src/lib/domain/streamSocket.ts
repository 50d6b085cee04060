import { z } from 'zod';
import { formNumber } from './formFields';

const HOST_NAME = /^[A-Za-z0-9]([A-Za-z0-9.-]*[A-Za-z0-9])?$/;
const IPV6 = /^[0-9A-Fa-f:]*:[0-9A-Fa-f:]*:[0-9A-Fa-f:.]*$/;

/** A server that shall send a stream's VOEvents. */
export const socketCreateSchema = z.object({
	host: z
		.string('A host is needed.')
		.trim()
		.min(1, { error: 'A host is needed.', abort: true })
		.max(253, 'At most 253 characters.')
		.refine(
			(text) => HOST_NAME.test(text) || IPV6.test(text),
			'A name or address alone, as broker.example.'
		),
	port: formNumber(1, 65_535).pipe(z.number().int('Whole numbers only.')),
	ivornPrefix: z
		.string()
		.trim()
		.max(200, 'At most 200 characters.')
		.regex(/^(ivo:\/\/\S+)?$/, 'The beginning of an IVORN, as ivo://broker.example/, or nothing.')
		.default('')
});
export type SocketCreate = z.output<typeof socketCreateSchema>;

const socketId = z.uuid('There is no such socket.');
export const socketRemoveSchema = z.object({ socketId });
export const socketSwitchSchema = z.object({ socketId, enabled: z.enum(['yes', 'no']) });

/** What the stream's page shows of a socket; instants are ISO 8601 UTC strings. */
export type SocketView = {
	id: string;
	host: string;
	port: number;
	ivornPrefix: string;
	enabled: boolean;
	/** Whether a worker looks after it at this moment. */
	held: boolean;
	connectedAt: string | null;
	/** The last message of any kind, a few seconds late. */
	lastAliveAt: string | null;
	lastError: string | null;
	lastErrorAt: string | null;
};

export type SocketState = 'off' | 'waiting' | 'connecting' | 'connected';

/** What a socket is about; one that no worker holds is not connected, whatever its last holder wrote. */
export function socketState(
	socket: Pick<SocketView, 'enabled' | 'held' | 'connectedAt'>
): SocketState {
	if (!socket.enabled) return 'off';
	if (!socket.held) return 'waiting';
	return socket.connectedAt ? 'connected' : 'connecting';
}
