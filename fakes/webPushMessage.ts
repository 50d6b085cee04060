import { createDecipheriv, createECDH, createPublicKey, hkdfSync, verify } from 'node:crypto';

/** A device's side of a push subscription, as a browser keeps it. */
export type DeviceKeys = { privateKey: Buffer; publicKey: Buffer; authSecret: Buffer };

export type VapidClaims = { aud: string; exp: number; sub: string };

const HEADER_BYTES = 21;
const TAG_BYTES = 16;
const LONGEST_EXPIRY_S = 86_400;

/**
 * The plaintext of a push message's body: aes128gcm (RFC 8188, one record) with the key agreed as in
 * RFC 8291, section 3.4. Throws when the body is malformed or was made for another device.
 */
export function decryptPushBody(body: Buffer, device: DeviceKeys): Buffer {
	if (body.length < HEADER_BYTES) throw new Error('The body has no aes128gcm header');
	const salt = body.subarray(0, 16);
	const recordSizeBytes = body.readUInt32BE(16);
	const recordStart = HEADER_BYTES + body.readUInt8(20);
	const senderKey = body.subarray(HEADER_BYTES, recordStart);
	const record = body.subarray(recordStart);
	if (senderKey.length !== 65) throw new Error('The key id is not an uncompressed P-256 point');
	if (record.length <= TAG_BYTES || record.length > recordSizeBytes) {
		throw new Error('The body must be one record of at most the record size');
	}

	const agreement = createECDH('prime256v1');
	agreement.setPrivateKey(device.privateKey);
	const keyInfo = Buffer.concat([Buffer.from('WebPush: info\0'), device.publicKey, senderKey]);
	const inputKey = expand(agreement.computeSecret(senderKey), device.authSecret, keyInfo, 32);
	const key = expand(inputKey, salt, Buffer.from('Content-Encoding: aes128gcm\0'), 16);
	const nonce = expand(inputKey, salt, Buffer.from('Content-Encoding: nonce\0'), 12);

	const decipher = createDecipheriv('aes-128-gcm', key, nonce);
	decipher.setAuthTag(record.subarray(-TAG_BYTES));
	const padded = Buffer.concat([decipher.update(record.subarray(0, -TAG_BYTES)), decipher.final()]);
	let end = padded.length - 1;
	while (end >= 0 && padded[end] === 0) end -= 1;
	// RFC 8188, section 2: the last (here the only) record ends in 0x02 and any zeros.
	if (padded[end] !== 2) throw new Error('The record has no final delimiter');
	return padded.subarray(0, end);
}

/**
 * The claims of an `Authorization: vapid t=…, k=…` header (RFC 8292), with the key that signed it in
 * base64url. Throws unless the signature holds, the audience is `origin` and the token is in force.
 */
export function verifyVapid(
	authorization: string,
	origin: string,
	nowMs: number
): { claims: VapidClaims; key: string } {
	const token = /(?:^vapid\s|,|\s)t=([\w.-]+)/.exec(authorization)?.[1];
	const key = /(?:^vapid\s|,|\s)k=([\w-]+)/.exec(authorization)?.[1];
	if (!authorization.startsWith('vapid ') || !token || !key) throw new Error('Not a VAPID header');
	const point = Buffer.from(key, 'base64url');
	if (point.length !== 65 || point[0] !== 4) throw new Error('k is not a P-256 point');
	const [head = '', payload = '', signature = ''] = token.split('.');
	const publicKey = createPublicKey({
		format: 'jwk',
		key: {
			kty: 'EC',
			crv: 'P-256',
			x: point.subarray(1, 33).toString('base64url'),
			y: point.subarray(33).toString('base64url')
		}
	});
	const signed = verify(
		'sha256',
		Buffer.from(`${head}.${payload}`),
		{ key: publicKey, dsaEncoding: 'ieee-p1363' },
		Buffer.from(signature, 'base64url')
	);
	const claims = jsonPart(payload) as Partial<VapidClaims>;
	if (!signed || jsonPart(head).alg !== 'ES256') throw new Error('The token is not signed by k');
	const { aud, exp, sub = '' } = claims;
	if (aud !== origin) throw new Error(`aud must be ${origin}`);
	const remainingS = typeof exp === 'number' ? exp - nowMs / 1000 : NaN;
	if (!(remainingS > 0 && remainingS <= LONGEST_EXPIRY_S)) {
		throw new Error('exp must be within the next 24 hours');
	}
	if (!/^(mailto:|https:)/.test(sub)) throw new Error('sub must be a mailto: or https: address');
	return { claims: { aud, exp: exp as number, sub }, key };
}

function expand(secret: Buffer, salt: Buffer, info: Buffer, sizeBytes: number): Buffer {
	return Buffer.from(hkdfSync('sha256', secret, salt, info, sizeBytes));
}

function jsonPart(part: string): Record<string, unknown> {
	return JSON.parse(Buffer.from(part, 'base64url').toString('utf8')) as Record<string, unknown>;
}
