import { createHash, createHmac, timingSafeEqual } from 'node:crypto';
import type { IncomingMessage } from 'node:http';
import { RequestError } from './loopbackServer';

const AUTHORIZATION =
	/^AWS4-HMAC-SHA256 Credential=([^/]+)\/(\d{8})\/([a-z0-9-]+)\/s3\/aws4_request, ?SignedHeaders=([a-z0-9;-]+), ?Signature=([0-9a-f]{64})$/;
const CLOCK_MS = 15 * 60_000;

/** Checks a request's signature as an S3 service does (AWS Signature Version 4); 403 says what is wrong. */
export function verifySignature(
	request: IncomingMessage,
	url: URL,
	keys: { accessKey: string; secretKey: string },
	nowMs: number
): void {
	const match = AUTHORIZATION.exec(request.headers.authorization ?? '');
	if (!match) throw new RequestError(403, 'Authorization is no AWS4-HMAC-SHA256 signature');
	const [, accessKey = '', day = '', region = '', signedHeaders = '', signature = ''] = match;
	if (accessKey !== keys.accessKey) throw new RequestError(403, 'No such access key');
	const stamp = String(request.headers['x-amz-date'] ?? '');
	const time = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(stamp);
	const sentMs = time
		? Date.parse(`${time.slice(1, 4).join('-')}T${time.slice(4).join(':')}Z`)
		: NaN;
	if (!(Math.abs(sentMs - nowMs) < CLOCK_MS) || !stamp.startsWith(day)) {
		throw new RequestError(403, 'x-amz-date is missing, or too far from now');
	}
	const names = signedHeaders.split(';');
	for (const needed of ['host', 'x-amz-date', 'x-amz-content-sha256']) {
		if (!names.includes(needed)) throw new RequestError(403, `${needed} is not signed`);
	}
	const query = [...url.searchParams]
		.map(([name, value]) => `${encoded(name)}=${encoded(value)}`)
		.sort()
		.join('&');
	const canonical = [
		request.method,
		url.pathname,
		query,
		...names.map((name) => `${name}:${String(request.headers[name] ?? '').trim()}`),
		'',
		signedHeaders,
		request.headers['x-amz-content-sha256']
	].join('\n');
	const scope = `${day}/${region}/s3/aws4_request`;
	const hash = createHash('sha256').update(canonical).digest('hex');
	const key = ['s3', 'aws4_request'].reduce(hmac, hmac(hmac(`AWS4${keys.secretKey}`, day), region));
	const expected = hmac(key, `AWS4-HMAC-SHA256\n${stamp}\n${scope}\n${hash}`);
	if (!timingSafeEqual(expected, Buffer.from(signature, 'hex'))) {
		throw new RequestError(403, 'The signature does not match the request');
	}
}

function hmac(key: string | Buffer, text: string): Buffer {
	return createHmac('sha256', key).update(text).digest();
}

/** As RFC 3986 has it: letters, digits and -._~ stand for themselves. */
function encoded(text: string): string {
	return encodeURIComponent(text).replace(
		/[!'()*]/g,
		(letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`
	);
}
