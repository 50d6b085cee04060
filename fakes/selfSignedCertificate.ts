import { generateKeyPairSync, randomBytes, sign, X509Certificate } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

export type ServerCertificate = { keyPem: string; certificatePem: string; certificatePath: string };

const DAY_MS = 86_400_000;
const VALID_DAYS = 3650;

/**
 * A certificate for 127.0.0.1 and localhost, signed with its own P-256 key and kept in `directory`
 * (made again when it has run out). Clients trust it by `ca` or NODE_EXTRA_CA_CERTS.
 */
export function loopbackCertificate(directory: string): ServerCertificate {
	const keyPath = join(directory, 'key.pem');
	const certificatePath = join(directory, 'certificate.pem');
	if (!isUsable(keyPath, certificatePath)) {
		mkdirSync(directory, { recursive: true, mode: 0o700 });
		const made = makeCertificate(Date.now());
		writeFileSync(keyPath, made.keyPem, { mode: 0o600 });
		writeFileSync(certificatePath, made.certificatePem);
	}
	return {
		keyPem: readFileSync(keyPath, 'utf8'),
		certificatePem: readFileSync(certificatePath, 'utf8'),
		certificatePath
	};
}

function isUsable(keyPath: string, certificatePath: string): boolean {
	if (!existsSync(keyPath) || !existsSync(certificatePath)) return false;
	try {
		const certificate = new X509Certificate(readFileSync(certificatePath));
		return Date.parse(certificate.validTo) > Date.now() + DAY_MS;
	} catch {
		// A file cut off in the middle of an earlier start.
		return false;
	}
}

function makeCertificate(nowMs: number): { keyPem: string; certificatePem: string } {
	const { privateKey, publicKey } = generateKeyPairSync('ec', { namedCurve: 'P-256' });
	const ecdsaWithSha256 = sequence(hex('06082a8648ce3d040302'));
	const name = sequence(
		der(0x31, sequence(hex('0603550403'), der(0x0c, Buffer.from('Duskline local push service'))))
	);
	const subjectAltName = sequence(der(0x87, hex('7f000001')), der(0x82, Buffer.from('localhost')));
	const certificateAuthority = sequence(hex('0101ff'));
	// RFC 5280, section 4.1: version 3, serial, algorithm, issuer, validity, subject, key, extensions.
	const toBeSigned = sequence(
		der(0xa0, hex('020102')),
		der(0x02, Buffer.concat([hex('01'), randomBytes(15)])),
		ecdsaWithSha256,
		name,
		sequence(generalizedTime(nowMs - DAY_MS), generalizedTime(nowMs + VALID_DAYS * DAY_MS)),
		name,
		publicKey.export({ type: 'spki', format: 'der' }),
		der(
			0xa3,
			sequence(
				sequence(hex('0603551d11'), der(0x04, subjectAltName)),
				sequence(hex('0603551d13'), hex('0101ff'), der(0x04, certificateAuthority))
			)
		)
	);
	const signature = sign('sha256', toBeSigned, privateKey);
	const certificate = sequence(
		toBeSigned,
		ecdsaWithSha256,
		der(0x03, Buffer.concat([hex('00'), signature]))
	);
	const lines = certificate.toString('base64').replace(/.{64}(?=.)/g, '$&\n');
	return {
		keyPem: privateKey.export({ type: 'pkcs8', format: 'pem' }) as string,
		certificatePem: `-----BEGIN CERTIFICATE-----\n${lines}\n-----END CERTIFICATE-----\n`
	};
}

function hex(text: string): Buffer {
	return Buffer.from(text, 'hex');
}

function sequence(...parts: Buffer[]): Buffer {
	return der(0x30, Buffer.concat(parts));
}

function generalizedTime(instantMs: number): Buffer {
	const digits = new Date(instantMs).toISOString().replace(/\D/g, '').slice(0, 14);
	return der(0x18, Buffer.from(`${digits}Z`));
}

/** One DER element: tag, length in the shortest form, content. */
function der(tag: number, content: Buffer): Buffer {
	const { length } = content;
	const head =
		length < 0x80
			? [tag, length]
			: length < 0x100
				? [tag, 0x81, length]
				: [tag, 0x82, length >> 8, length & 0xff];
	return Buffer.concat([Buffer.from(head), content]);
}
