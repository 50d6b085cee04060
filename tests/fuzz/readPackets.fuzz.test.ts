import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { alertContentSchema } from '../../src/lib/domain/alertPacket';
import { fileShape } from '../../src/compute';
import type { App } from '../../src/lib/server/app';
import { DomainError } from '../../src/lib/server/domainError';
import { statusOf } from '../../src/lib/server/http/problem';
import { readPacket } from '../../src/lib/server/packets/packetReaders';
import type { KeptPacket, StreamRow } from '../../src/lib/server/packets/readOutcome';
import { mutate, seededRandom } from './mutate';

/** What is mutated: a new format's fixtures are one more entry. */
const FORMATS: { name: string; contentType: string; bodies: Buffer[] }[] = [
	{ name: 'VOEvent', contentType: 'application/voevent+xml', bodies: fixtures('.xml') },
	{ name: 'JSON', contentType: 'application/json', bodies: fixtures('.json') },
	{ name: 'Files', contentType: 'multipart/form-data', bodies: skyFiles() }
];
const ROUNDS = 20_000;
const SEED = 20_261_201;
/** Reading one takes a millisecond; a second means that something stalls. */
const LONGEST_MS = 1000;

function fixtures(ending: string): Buffer[] {
	const folder = 'fixtures/packets';
	const names = readdirSync(folder).filter((name) => name.endsWith(ending));
	return names.sort().map((name) => readFileSync(`${folder}/${name}`));
}

const source: StreamRow = {
	id: '00000000-0000-4000-8000-000000000001',
	code: 'tambour',
	name: 'Tambour',
	streamClass: 'gamma',
	defaultContainment: 0.9,
	defaultSystematicDeg: 0.1,
	alertsPerYear: 100,
	coincidenceWindowS: 3600,
	fade: { m1Mean: 22.2, m1Spread: 2.3, alpha: 1 },
	silentAfterMinutes: 1440,
	paramMap: {
		significance: { group: '', name: 'rate_significance', factor: 1 },
		falseAlarmPerYear: { group: 'Trigger', name: 'false_alarms_per_s', factor: 31_557_600 },
		systematicDeg: { group: 'Position', name: 'systematic', factor: 1 / 60 }
	},
	lastHeardAt: null,
	silenceNotedAt: null,
	retiredAt: null,
	createdAt: new Date('2026-01-01T00:00:00Z')
};

/** Maps and coverage maps, as they come beside a packet. */
function skyFiles(): Buffer[] {
	const folder = 'fixtures/fits';
	const standard = JSON.parse(readFileSync('fixtures/sky/moc-2.0-examples.json', 'utf8')) as {
		ascii_smoc: string;
		json_smoc: string;
	};
	return [
		...readdirSync(folder).map((name) => readFileSync(`${folder}/${name}`)),
		Buffer.from(standard.ascii_smoc),
		Buffer.from(standard.json_smoc)
	];
}

const FILELESS = Buffer.from(
	JSON.stringify({
		packetId: 'TB-1',
		serial: 1,
		role: 'observation',
		kind: 'report',
		t0: '2026-12-01T03:41:27Z'
	})
);

/** Reading needs neither database nor clock; what reaches for them fails here. Of a file, its bytes are there. */
const appWith = (file: Buffer) =>
	({
		files: { get: () => Promise.resolve(new Uint8Array(file).buffer) },
		compute: { fileShape: async (load: () => Promise<ArrayBuffer>) => fileShape(await load()) }
	}) as unknown as App;

type Verdict = 'alert' | 'noted' | 'refused';

async function verdictOn(kept: KeptPacket, app: App): Promise<Verdict> {
	try {
		const outcome = await readPacket(app, source, kept);
		if (outcome.kind === 'noted') {
			expect(outcome.reason).not.toBe('');
			return 'noted';
		}
		expect(alertContentSchema.safeParse(outcome.content).error).toBeUndefined();
		for (const note of outcome.notes) expect(note).not.toMatch(/NaN|undefined/);
		return 'alert';
	} catch (error) {
		if (!(error instanceof DomainError)) throw error;
		expect(statusOf(error.code)).toBeGreaterThanOrEqual(400);
		expect(statusOf(error.code)).toBeLessThan(500);
		const namesField = error.errors.length > 0 && error.errors.every(({ detail }) => detail !== '');
		const namesByte = /\bbyte \d+/.test(error.message) || error.message === 'The body is empty.';
		expect(namesField || namesByte, error.message).toBe(true);
		return 'refused';
	}
}

describe('packets changed at random', () => {
	it.each(FORMATS)(
		'$name: each is read or refused with a field or byte, and soon',
		{ timeout: 120_000 },
		async ({ name, contentType, bodies }) => {
			expect(bodies.length).toBeGreaterThan(3);
			const random = seededRandom(SEED);
			const verdicts: Record<Verdict, number> = { alert: 0, noted: 0, refused: 0 };
			const rounds = Math.ceil(ROUNDS / FORMATS.length);
			for (let round = 0; round < rounds; round++) {
				const body = mutate(bodies[round % bodies.length]!, random);
				const start = performance.now();
				try {
					const receivedAt = new Date('2026-12-01T04:00:00Z');
					const isFile = contentType === 'multipart/form-data';
					const kept = {
						id: 1,
						contentType,
						body: isFile ? FILELESS : body,
						fileKey: isFile ? 'packets/1' : null,
						fileName: null,
						receivedAt
					};
					verdicts[await verdictOn(kept, appWith(body))]++;
				} catch (error) {
					throw new Error(
						`${name}, seed ${SEED}, round ${round}: ${body.toString('base64').slice(0, 20_000)}`,
						{ cause: error }
					);
				}
				expect(performance.now() - start, `round ${round}`).toBeLessThan(LONGEST_MS);
			}
			// Both ways are taken often, or the mutations test nothing.
			expect(verdicts.alert).toBeGreaterThan(rounds / 20);
			expect(verdicts.refused).toBeGreaterThan(rounds / 4);
		}
	);
});
