import { describe, expect, it } from 'vitest';
import { ConfigError, parseConfig } from './config';

const GOOD = {
	DATABASE_URL: 'postgres://duskline@127.0.0.1:5432/duskline',
	ORIGIN: 'https://duskline.example',
	AUTH_SECRET: 'x'.repeat(32),
	SMTP_URL: 'smtp://127.0.0.1:25'
};

function refusalOf(environment: Record<string, string | undefined>): string {
	try {
		parseConfig(environment);
		return '';
	} catch (error) {
		expect(error).toBeInstanceOf(ConfigError);
		return (error as Error).message;
	}
}

describe('parseConfig', () => {
	it('takes the least environment and fills in the defaults', () => {
		expect(parseConfig(GOOD)).toMatchObject({ role: 'all', demo: false, vapid: null });
	});

	it('names every variable that is not set or wrong', () => {
		const message = refusalOf({ ...GOOD, ORIGIN: 'duskline', SMTP_URL: undefined });
		expect(message).toMatch(/ORIGIN must be an http/);
		expect(message).toMatch(/SMTP_URL is not set/);
		expect(message).not.toMatch(/DATABASE_URL|AUTH_SECRET/);
	});

	it('refuses the demo switch unless the origin is a loopback address', () => {
		for (const ORIGIN of [
			'https://duskline.example',
			'http://192.168.1.5:4180',
			'http://0.0.0.0:4180',
			'http://127.0.0.1.example:4180',
			'http://localhost.example'
		]) {
			expect(refusalOf({ ...GOOD, ORIGIN, DUSKLINE_DEMO: 'on' }), ORIGIN).toMatch(/DUSKLINE_DEMO/);
		}
		for (const ORIGIN of ['http://127.0.0.1:4180', 'http://localhost:4180', 'http://[::1]:4180']) {
			expect(parseConfig({ ...GOOD, ORIGIN, DUSKLINE_DEMO: 'on' }).demo, ORIGIN).toBe(true);
		}
	});

	it('takes object storage whole or not at all', () => {
		const storage = {
			STORAGE_URL: 'https://storage.example',
			STORAGE_BUCKET: 'files',
			STORAGE_ACCESS_KEY: 'key',
			STORAGE_SECRET_KEY: 'secret'
		};
		expect(parseConfig(GOOD).storage).toBeNull();
		expect(parseConfig({ ...GOOD, ...storage }).storage).toMatchObject({ region: 'us-east-1' });
		expect(refusalOf({ ...GOOD, ...storage, STORAGE_SECRET_KEY: undefined })).toMatch(
			/STORAGE_URL needs STORAGE_SECRET_KEY too/
		);
		expect(refusalOf({ ...GOOD, ...storage, STORAGE_BUCKET: 'Files' })).toMatch(/STORAGE_BUCKET/);
		expect(refusalOf({ ...GOOD, ...storage, STORAGE_URL: 's3://files' })).toMatch(/STORAGE_URL/);
	});

	it('reads the demo’s broker as host and port', () => {
		const broker = (text?: string) =>
			parseConfig({ ...GOOD, DUSKLINE_DEMO_BROKER: text }).demoBroker;
		expect(broker('127.0.0.1:4185')).toEqual({ host: '127.0.0.1', port: 4185 });
		expect(broker()).toBeNull();
		for (const text of ['127.0.0.1', ':4185', '127.0.0.1:0', '127.0.0.1:65536', 'http://a:1']) {
			expect(refusalOf({ ...GOOD, DUSKLINE_DEMO_BROKER: text }), text).toMatch(
				/DUSKLINE_DEMO_BROKER must be host:port/
			);
		}
	});

	it('refuses half a set of push keys and a short secret', () => {
		expect(refusalOf({ ...GOOD, VAPID_PUBLIC_KEY: 'key' })).toMatch(/go together/);
		expect(refusalOf({ ...GOOD, AUTH_SECRET: 'short' })).toMatch(/AUTH_SECRET must be at least 32/);
	});
});
