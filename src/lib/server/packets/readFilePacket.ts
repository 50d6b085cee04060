import { alertPacketSchema, type AlertPacket } from '../../domain/alertPacket';
import type { App } from '../app';
import { DomainError } from '../domainError';
import { parseJson } from '../http/api';
import { parseInput } from '../http/problem';
import { requireStore } from '../storage/objectStore';
import type { KeptPacket, ReadOutcome, StreamRow } from './readOutcome';

/** Stands for the file's region while the rest of the packet is checked. */
const ANY_SHAPE = { kind: 'map', uniq: [4], density: [1] };

/** Reads a packet in the product's own JSON whose region is in the file that came with it. */
export async function readFilePacket(
	{ body, fileKey, fileName }: KeptPacket,
	_source: StreamRow,
	app: App
): Promise<ReadOutcome> {
	const content = filelessPacket(parseJson(body));
	if (!fileKey) throw wrongFile('is needed: a map or coverage map', 'There is no file.');
	const store = requireStore(app.files);
	const answer = await app.compute.fileShape(() => store.get(fileKey));
	if ('fault' in answer) {
		const { place, detail } = answer.fault;
		throw wrongFile(`${place} ${detail}`, 'The file can’t be read.');
	}
	return {
		kind: 'alert',
		content: { ...content, shape: answer.shape },
		hasNormalShape: true,
		notes: [`its region came as a file${fileName ? `, ${fileName}` : ''}`]
	};
}

/** A packet that comes with a file, all but its region. */
export function filelessPacket(json: unknown): AlertPacket {
	const fields = typeof json === 'object' && json !== null ? json : {};
	if ('shape' in fields) {
		const detail = 'must not be given beside a file';
		throw new DomainError('invalid', 'Some fields are not valid.', [{ pointer: '/shape', detail }]);
	}
	if (fields !== json) return parseInput(alertPacketSchema, json);
	return parseInput(alertPacketSchema, { ...fields, shape: ANY_SHAPE });
}

function wrongFile(detail: string, sentence: string): DomainError {
	return new DomainError('invalid', sentence, [{ pointer: '/file', detail }]);
}
