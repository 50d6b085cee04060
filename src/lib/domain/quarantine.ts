import type { PacketChannel } from './vocabulary';

/** A body that could not be read, as the quarantine list shows it; instants are ISO 8601 UTC. */
export type QuarantinedPacket = {
	id: number;
	streamCode: string;
	streamName: string;
	channel: PacketChannel;
	contentType: string;
	bytes: number;
	receivedAt: string;
	/** The problem's code, as in the answer to the sender. */
	code: string;
	reason: string;
	/** The body's beginning, as text. */
	text: string;
};
