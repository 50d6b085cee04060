import { createHash, randomBytes } from 'node:crypto';
import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createObjectStore, type ObjectStore } from '../src/lib/server/storage/objectStore';
import { startObjectStore } from './objectStore';

const keys = { bucket: 'files', accessKey: 'local', secretKey: 'not-a-secret' };
const directory = mkdtempSync(join(tmpdir(), 'duskline-store-'));
let fake: Awaited<ReturnType<typeof startObjectStore>>;
let store: ObjectStore;

beforeAll(async () => {
	fake = await startObjectStore({ port: 0, stateDirectory: directory, ...keys });
	store = createObjectStore({ url: fake.url, region: 'eu-1', ...keys })!;
});
afterAll(async () => {
	await fake.close();
	rmSync(directory, { recursive: true });
});

const fail = (mode: string) =>
	fetch(`${fake.url}/-/fail`, { method: 'POST', body: JSON.stringify({ mode }) });

function* pieces(bytes: Buffer) {
	for (let at = 0; at < bytes.length; at += 65_536) yield bytes.subarray(at, at + 65_536);
}

describe('the server’s store on the fake storage', () => {
	// One request, and three parts.
	it.each([1000, 12 * 1024 * 1024 + 7])('keeps %i bytes as they are', async (length) => {
		const bytes = randomBytes(length);
		const key = `packet/${length}.fits`;
		await store.put(key, Readable.from(pieces(bytes)));
		const back = new Uint8Array(await store.get(key));
		const digest = (of: Uint8Array) => createHash('sha256').update(of).digest('hex');
		expect(digest(back)).toBe(digest(bytes));
		await store.remove(key);
		await expect(store.get(key)).rejects.toMatchObject({ code: 'unavailable' });
	});

	it('keeps nothing of a stream that breaks, and says why it broke', async () => {
		const broken = Readable.from(
			(function* () {
				yield* pieces(randomBytes(8 * 1024 * 1024));
				throw new RangeError('too much');
			})()
		);
		await expect(store.put('packet/broken', broken)).rejects.toThrow('too much');
		expect(readdirSync(directory)).toEqual(['parts']);
	});

	it('is refused with another secret', async () => {
		const stranger = createObjectStore({
			url: fake.url,
			region: 'eu-1',
			...keys,
			secretKey: 'guessed'
		})!;
		await expect(stranger.put('x', Readable.from([Buffer.from('x')]))).rejects.toMatchObject({
			code: 'unavailable'
		});
		expect((await fetch(`${fake.url}/files/x`)).status).toBe(403);
	});

	it('says that it is not available while the storage fails', { timeout: 20_000 }, async () => {
		await store.put('kept', Readable.from([Buffer.from('x')]));
		await fail('error');
		await expect(store.get('kept')).rejects.toMatchObject({ code: 'unavailable' });
		await fail('off');
		expect(Buffer.from(await store.get('kept')).toString()).toBe('x');
	});
});
