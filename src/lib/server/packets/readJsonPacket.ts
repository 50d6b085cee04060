import { alertPacketSchema } from '../../domain/alertPacket';
import { foldedRightAscensions } from '../../domain/rightAscension';
import { parseJson } from '../http/api';
import { parseInput } from '../http/problem';
import type { KeptPacket, ReadOutcome } from './readOutcome';

/** Reads a packet in the product's own JSON. */
export function readJsonPacket({ body }: Pick<KeptPacket, 'body'>): ReadOutcome {
	const json = parseJson(body);
	const content = parseInput(alertPacketSchema, json);
	const notes = foldedRightAscensions(json).map(
		(raDeg) => `right ascension ${raDeg}° was folded into 0 to 360°`
	);
	return { kind: 'alert', content, notes };
}
