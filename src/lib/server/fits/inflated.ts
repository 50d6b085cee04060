import { gunzipSync } from 'node:zlib';
import { FileFault } from './fileFault';

/** What a file may inflate to, at most. */
export const INFLATED_BYTES_MAX = 512 * 1024 * 1024;
/** What any file may inflate to, however small it is: a map that is empty but for one patch shrinks a lot. */
const INFLATED_BYTES_FREE = 64 * 1024 * 1024;
/** Past that, how many times its size; deflate itself reaches 1032. */
const RATIO_MAX = 100;

/** Whether bytes begin as gzip does (RFC 1952). */
export function isGzip(bytes: Uint8Array): boolean {
	return bytes[0] === 0x1f && bytes[1] === 0x8b;
}

/** A gzip file's content; stops while inflating once it is larger than its size allows. */
export function inflated(bytes: Uint8Array): Uint8Array {
	const maxOutputLength = Math.min(
		INFLATED_BYTES_MAX,
		Math.max(INFLATED_BYTES_FREE, RATIO_MAX * bytes.length)
	);
	try {
		return gunzipSync(bytes, { maxOutputLength });
	} catch (error) {
		if ((error as NodeJS.ErrnoException).code === 'ERR_BUFFER_TOO_LARGE') {
			throw new FileFault(
				'gzip',
				`inflates to more than ${Math.floor(maxOutputLength / 2 ** 20)} MiB`
			);
		}
		throw new FileFault('gzip', `can't be inflated: ${(error as Error).message}`);
	}
}
