import { readFileSync } from 'node:fs';
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { alert, packet, stream } from '../db/schema/alerts';
import { journal, transient } from '../db/schema/transients';
import { replayPacket } from '../packets/quarantineService';
import { takeIn, type Intake } from '../packets/takeInService';
import type { AuthenticatedStream } from '../streams/streamKeyService';

let world: World;
let tambour: AuthenticatedStream;
let carapace: AuthenticatedStream;
let steward: Actor;

beforeAll(async () => {
	world = await openWorld();
	tambour = await world.stream('tambour', 'gamma');
	carapace = await world.stream('carapace', 'wideXray');
	steward = await world.person('steward');
});
afterAll(() => world.close());

const fixture = (name: string) => readFileSync(`fixtures/packets/${name}.xml`, 'utf8');
const REPORT = 'ivo://tambour.invalid/alerts#TB-26120103';

/** A copy of a fixture with its IVORNs ending differently and its event elsewhere in the sky and on another day. */
function apart(name: string, ending: string, day: string): string {
	return fixture(name)
		.replaceAll('TB-26120103', `TB-26120103-${ending}`)
		.replaceAll('CP-0071', `CP-0071-${ending}`)
		.replace(/(<ISOTime>)\d{4}-\d{2}-\d{2}/, `$1${day}`);
}

async function send(source: AuthenticatedStream, text: string, contentType = 'application/xml') {
	return takeIn(world.app, source.stream, { body: Buffer.from(text), contentType, channel: 'api' });
}

function designationOf(intake: Intake): string {
	if (intake.kind !== 'alert') throw new Error(intake.reason);
	return intake.receipt.designation;
}

async function alertRow(packetId: string) {
	const [row] = await world.app.database.select().from(alert).where(eq(alert.packetId, packetId));
	return row!;
}

async function transientRow(designation: string) {
	const { database } = world.app;
	const [row] = await database
		.select()
		.from(transient)
		.where(eq(transient.designation, designation));
	return row!;
}

describe('a VOEvent that comes in', () => {
	it('becomes an alert, and the same again, however it is typed, is a copy', async () => {
		const first = await send(tambour, fixture('voeventReport'));
		const again = await send(tambour, fixture('voeventReport'), 'text/xml');
		const rewritten = await send(
			tambour,
			fixture('voeventReport').replace(/\n\s*/g, ' '),
			'application/voevent+xml'
		);
		expect(first).toMatchObject({ isNew: true, receipt: { packetId: REPORT, serial: 1 } });
		for (const copy of [again, rewritten]) {
			expect(copy).toMatchObject({ isNew: false });
			expect(designationOf(copy)).toBe(designationOf(first));
		}
		expect(await alertRow(REPORT)).toMatchObject({
			role: 'observation',
			kind: 'report',
			live: true
		});
	});

	it('with other content under the same IVORN goes to quarantine', async () => {
		const text = fixture('voeventReport').replace('<C1>83.4<', '<C1>93.4<');
		await expect(send(tambour, text)).rejects.toMatchObject({ code: 'packetConflict' });
	});

	it('of role test starts a test transient, never a real one', async () => {
		const row = await transientRow(designationOf(await send(tambour, fixture('voeventTest'))));
		expect(row.isTest).toBe(true);
	});

	it.each(['voeventPrediction', 'voeventUtility'])(
		'%s is kept as noted, with the reason',
		async (name) => {
			const before = await world.app.database.$count(alert);
			const intake = await send(carapace, fixture(name));
			expect(intake.kind).toBe('noted');
			expect(await world.app.database.$count(alert)).toBe(before);
			const [row] = await world.app.database
				.select()
				.from(packet)
				.where(and(eq(packet.state, 'noted'), eq(packet.body, Buffer.from(fixture(name)))));
			expect(row!.detail).toContain('no alert');
		}
	);
});

describe('citations by IVORN', () => {
	it('a followup of another stream joins what it cites and leaves it standing', async () => {
		const home = designationOf(await send(tambour, apart('voeventReport', 'f', '2026-11-20')));
		const intake = await send(carapace, apart('voeventFollowup', 'f', '2026-11-20'));
		expect(designationOf(intake)).toBe(home);
		expect(await alertRow(`${REPORT}-f`)).toMatchObject({ live: true });
		expect(await alertRow('ivo://carapace.invalid/alerts#CP-0071-f')).toMatchObject({
			live: true,
			membership: 'cited'
		});
	});

	it('supersedes replaces all that was said before', async () => {
		const home = designationOf(await send(tambour, apart('voeventReport', 's', '2026-11-21')));
		const intake = await send(tambour, apart('voeventSupersedes', 's', '2026-11-21'));
		expect(designationOf(intake)).toBe(home);
		expect((await alertRow(`${REPORT}-s`)).live).toBe(false);
		expect(await alertRow(`${REPORT}-s-ground`)).toMatchObject({ live: true, kind: 'update' });
		expect((await transientRow(home)).regionVersion).toBe(2);
	});

	it('a retraction closes what it cites as retracted', async () => {
		const home = designationOf(await send(tambour, apart('voeventReport', 'r', '2026-11-22')));
		const intake = await send(tambour, apart('voeventRetraction', 'r', '2026-11-22'));
		expect(designationOf(intake)).toBe(home);
		expect((await alertRow(`${REPORT}-r`)).live).toBe(false);
		expect((await transientRow(home)).state).toBe('retracted');
	});

	it('a retraction that overtakes its report keeps it from living', async () => {
		const first = await send(tambour, apart('voeventRetraction', 'or', '2026-11-23'));
		const late = await send(tambour, apart('voeventReport', 'or', '2026-11-23'));
		expect(designationOf(late)).toBe(designationOf(first));
		expect((await alertRow(`${REPORT}-or`)).live).toBe(false);
		expect((await transientRow(designationOf(late))).state).toBe('retracted');
	});

	it('an update that overtakes its report stays the one that counts', async () => {
		const first = await send(tambour, apart('voeventSupersedes', 'os', '2026-11-24'));
		const late = await send(tambour, apart('voeventReport', 'os', '2026-11-24'));
		expect(designationOf(late)).toBe(designationOf(first));
		expect((await alertRow(`${REPORT}-os`)).live).toBe(false);
		expect((await alertRow(`${REPORT}-os-ground`)).live).toBe(true);
		expect((await transientRow(designationOf(late))).state).toBe('open');
	});

	it('a followup that overtakes what it cites gets it into its own transient', async () => {
		const first = await send(carapace, apart('voeventFollowup', 'of', '2026-11-25'));
		const late = await send(tambour, apart('voeventReport', 'of', '2026-11-25'));
		expect(designationOf(late)).toBe(designationOf(first));
		expect((await alertRow(`${REPORT}-of`)).live).toBe(true);
	});
});

describe('a test that cites what is real', () => {
	const asTest = (text: string) => text.replace('role="observation"', 'role="test"');

	it.each(['voeventFollowup', 'voeventSupersedes', 'voeventRetraction'])(
		'%s neither joins it nor takes anything from it, whichever comes first',
		async (name) => {
			for (const [ending, testFirst] of [
				[`t1${name.length}`, false],
				[`t2${name.length}`, true]
			] as const) {
				const report = apart('voeventReport', ending, '2026-11-15');
				const rehearsal = asTest(apart(name, ending, '2026-11-15'));
				const order = testFirst ? [rehearsal, report] : [report, rehearsal];
				const homes = [];
				for (const text of order) homes.push(designationOf(await send(tambour, text)));
				expect(homes[0]).not.toBe(homes[1]);
				const real = await alertRow(`${REPORT}-${ending}`);
				expect(real.live).toBe(true);
				const home = await transientRow(homes[testFirst ? 1 : 0]!);
				expect(home).toMatchObject({ id: real.transientId, isTest: false, state: 'open' });
				expect((await transientRow(homes[testFirst ? 0 : 1]!)).isTest).toBe(true);
			}
		}
	);
});

describe('a VOEvent that can’t be read', () => {
	it('waits in quarantine with its place, and a replay refuses it again', async () => {
		const text = apart('voeventReport', 'q', '2026-11-26').replace('ICRS-GEO"', 'FK4-GEO"');
		await expect(send(tambour, text)).rejects.toMatchObject({ code: 'invalid' });
		const bomb = '<!DOCTYPE a [<!ENTITY b "c">]><a>&b;</a>';
		await expect(send(tambour, bomb)).rejects.toMatchObject({ code: 'malformedBody' });
		const [row] = await world.app.database
			.select()
			.from(packet)
			.where(eq(packet.body, Buffer.from(bomb)));
		expect(row).toMatchObject({ state: 'refused', code: 'malformedBody' });
		expect(row!.detail).toContain('byte 0');
		await expect(replayPacket(world.app, steward, row!.id)).rejects.toMatchObject({
			code: 'malformedBody'
		});
	});

	it('is refused without harm when what it quotes holds a NUL', async () => {
		const json = JSON.stringify(circlePacket({ packetId: 'TB-nul', remarks: 'a\u0000b' }));
		await expect(send(tambour, json, 'application/json')).rejects.toMatchObject({
			code: 'invalid'
		});
		const named = JSON.stringify(circlePacket({ packetId: 'TB-nul', 'x\u0000y': 1 }));
		await expect(send(tambour, named, 'application/json')).rejects.toMatchObject({
			code: 'invalid'
		});
		await expect(send(tambour, '{"a\u0000": 1}', 'application/json')).rejects.toMatchObject({
			code: 'malformedBody'
		});
	});
});

describe('a stream’s map of Params', () => {
	it('is what the numbers are read by', async () => {
		const { database } = world.app;
		const paramMap = {
			significance: { group: '', name: 'rate_significance', factor: 1 },
			systematicDeg: { group: 'Position', name: 'systematic', factor: 1 / 60 }
		};
		const [changed] = await database
			.update(stream)
			.set({ paramMap })
			.where(eq(stream.code, 'tambour'))
			.returning();
		const intake = await send(
			{ ...tambour, stream: changed! },
			apart('voeventReport', 'm', '2026-11-27').replace('value="96"', 'value="?"')
		);
		const row = await alertRow(`${REPORT}-m`);
		expect(row.significance).toBe(8.1);
		const lines = await database
			.select({ summary: journal.summary })
			.from(journal)
			.where(eq(journal.transientId, (await transientRow(designationOf(intake))).id));
		expect(lines.map(({ summary }) => summary).join()).toContain(
			'Param systematic of Position is no number and was left out'
		);
	});
});
