import type { App } from '../app';
import { DomainError } from '../domainError';
import { mediaTypeOf, readBody } from '../http/api';
import { authenticateStreamKey } from '../streams/streamKeyService';
import { limitKey } from './keyRateLimit';
import type { StreamRow } from './readOutcome';
import { receiveUpload } from './receiveUpload';
import { keepRefused, takeIn, type Intake } from './takeInService';

const LIMIT_BYTES = 256 * 1024;

/** A packet posted with a stream's key: authenticated, counted against the key's rate, kept and judged. */
export async function postedPacket(app: App, request: Request): Promise<Intake> {
	const { stream, keyId } = await authenticateStreamKey(app, request.headers.get('authorization'));
	await limitKey(keyId!);
	const contentType = mediaTypeOf(request);
	if (contentType === 'multipart/form-data') return postedFile(app, stream, keyId, request);
	const received = { contentType, channel: 'api' as const, keyId };
	try {
		return await takeIn(app, stream, { ...received, body: await readBody(request, LIMIT_BYTES) });
	} catch (error) {
		if (error instanceof DomainError && error.code === 'bodyTooLarge') {
			// Nothing of it is kept but that it came: it may be of any size.
			await keepRefused(app, stream, { ...received, body: Buffer.alloc(0) }, error);
		}
		throw error;
	}
}

/** A packet in the form's field `packet` with its region in the part `file`. */
async function postedFile(
	app: App,
	source: StreamRow,
	keyId: string | null,
	request: Request
): Promise<Intake> {
	const received = { contentType: 'multipart/form-data', channel: 'file' as const, keyId };
	const { fields, file } = await receiveUpload(app, request).catch(async (error: unknown) => {
		if (error instanceof DomainError && error.code !== 'unavailable') {
			await keepRefused(app, source, { ...received, body: Buffer.alloc(0) }, error);
		}
		throw error;
	});
	const body = Buffer.from(fields.get('packet') ?? '');
	return takeIn(app, source, { ...received, body, file });
}
