import type { App } from '../app';
import { DomainError } from '../domainError';
import { readFilePacket } from './readFilePacket';
import { readVoEvent } from '../voevent/readVoEvent';
import { readJsonPacket } from './readJsonPacket';
import type { KeptPacket, ReadOutcome, StreamRow } from './readOutcome';

export type PacketReader = (
	kept: KeptPacket,
	source: StreamRow,
	app: App
) => ReadOutcome | Promise<ReadOutcome>;

/** By media type; what is not here is refused. */
const READERS: Record<string, PacketReader> = {
	'application/json': readJsonPacket,
	'multipart/form-data': readFilePacket,
	'application/voevent+xml': readVoEvent,
	'application/xml': readVoEvent,
	'text/xml': readVoEvent
};

/** What a body says, by its media type, read with the stream's settings as they are now. */
export async function readPacket(
	app: App,
	source: StreamRow,
	kept: KeptPacket
): Promise<ReadOutcome> {
	const reader = READERS[kept.contentType];
	if (!reader) {
		throw new DomainError(
			'unsupportedMediaType',
			`Packets of the type ${kept.contentType || '(none)'} can’t be read; send ${Object.keys(READERS).join(', ')}.`
		);
	}
	return reader(kept, source, app);
}
