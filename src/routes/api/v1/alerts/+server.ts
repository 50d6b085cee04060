import { alertPacketSchema } from '$lib/domain/alertPacket';
import { receiveAlert } from '$lib/server/alerts/alertService';
import { DomainError } from '$lib/server/domainError';
import { answer, mediaTypeOf, parseJson, readBody } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { notingRefusals } from '$lib/server/streams/packetRefusals';
import { authenticateStreamKey } from '$lib/server/streams/streamKeyService';
import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

const LIMIT_BYTES = 256 * 1024;

/** Takes in a packet of the stream whose key the request carries: 201 when new, 200 for a copy. */
export const POST: RequestHandler = ({ request, locals }) =>
	answer(async () => {
		const source = await authenticateStreamKey(locals.app, request.headers.get('authorization'));
		return notingRefusals(locals.app, source, async () => {
			const contentType = mediaTypeOf(request);
			if (contentType !== 'application/json') {
				await readBody(request, LIMIT_BYTES);
				throw new DomainError('unsupportedMediaType', 'Send the packet as application/json.');
			}
			const body = await readBody(request, LIMIT_BYTES);
			const packet = parseInput(alertPacketSchema, parseJson(body));
			const { receipt, isNew } = await receiveAlert(locals.app, source, {
				packet,
				body,
				contentType
			});
			return json(receipt, { status: isNew ? 201 : 200 });
		});
	});
