import { desc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import { alert, packet } from '../db/schema/alerts';
import { journal, transient } from '../db/schema/transients';
import type { AuthenticatedStream } from '../streams/streamKeyService';

let world: World;
let gamma: AuthenticatedStream;
let xray: AuthenticatedStream;
let count = 0;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	xray = await world.stream('carapace', 'wideXray');
});
afterAll(() => world.close());

/** A packet whose burst has nothing to do with those of the other tests: each is a week apart. */
function fresh(overrides: Record<string, unknown> = {}) {
	world.tick(7 * 86_400);
	const t0 = new Date(+world.app.now() - 120_000).toISOString();
	return circlePacket({ packetId: `TB-${++count}`, t0, ...overrides });
}

const linesOf = async (designation: string) =>
	world.app.database
		.select({ kind: journal.kind, summary: journal.summary })
		.from(journal)
		.innerJoin(transient, eq(transient.id, journal.transientId))
		.where(eq(transient.designation, designation))
		.orderBy(journal.id);

const summariesOf = async (designation: string, kind: string) =>
	(await linesOf(designation)).filter((line) => line.kind === kind).map((line) => line.summary);

async function lastPacket() {
	const [row] = await world.app.database.select().from(packet).orderBy(desc(packet.id)).limit(1);
	return row!;
}

const alertsNamed = (packetId: unknown) =>
	world.app.database
		.select()
		.from(alert)
		.where(eq(alert.packetId, String(packetId)));

describe('a packet that comes again', () => {
	it('is one alert however often and however spaced, with one line in the journal', async () => {
		const sent = fresh();
		const first = await world.receive(gamma, sent);
		const again = await world.receive(gamma, sent);
		const reordered = await world.receive(
			gamma,
			Object.fromEntries(Object.entries(sent).reverse())
		);
		expect([again, reordered]).toEqual([
			{ kind: 'alert', receipt: first.receipt, isNew: false },
			{ kind: 'alert', receipt: first.receipt, isNew: false }
		]);
		expect(await alertsNamed(sent.packetId)).toHaveLength(1);
		expect((await lastPacket()).state).toBe('copy');
		expect(await summariesOf(first.receipt.designation, 'alertRepeated')).toEqual([
			`Tambour ${String(sent.packetId)}, serial 1: came again, nothing changed`
		]);
	});

	it('with other content leaves the first standing; the other waits in quarantine', async () => {
		const sent = fresh();
		const { receipt } = await world.receive(gamma, sent);
		await expect(world.receive(gamma, { ...sent, significance: 3 })).rejects.toMatchObject({
			code: 'packetConflict'
		});
		expect(await lastPacket()).toMatchObject({ state: 'refused', code: 'packetConflict' });
		const [row] = await alertsNamed(sent.packetId);
		expect(row!.significance).toBe(sent.significance);
		const [line] = await summariesOf(receipt.designation, 'alertRepeated');
		expect(line).toContain('the first one stands, the other is in quarantine');
	});

	it('is the stream’s own: two streams may use one name', async () => {
		const sent = fresh();
		const ours = await world.receive(gamma, sent);
		const theirs = await world.receive(xray, { ...sent, shape: circle(200, 40, 0.05) });
		expect(theirs.isNew).toBe(true);
		expect(theirs.receipt.designation).not.toBe(ours.receipt.designation);
		expect(await alertsNamed(sent.packetId)).toHaveLength(2);
		const [line] = await summariesOf(theirs.receipt.designation, 'alertReceived');
		expect(line).toContain(`Carapace ${String(sent.packetId)}, serial 1: started this transient`);
	});
});

describe('packets out of their order', () => {
	it('an update before its first report stands; the report joins it and counts as replaced', async () => {
		const report = fresh();
		const update = {
			...report,
			packetId: `${String(report.packetId)}-b`,
			kind: 'update',
			shape: circle(83.5, -8.1, 1),
			cites: [{ stream: 'tambour', packetId: report.packetId, relation: 'supersedes' }]
		};
		const early = await world.receive(gamma, update);
		expect(early.isNew).toBe(true);
		const late = await world.receive(gamma, report);
		expect(late.receipt.designation).toBe(early.receipt.designation);
		expect((await alertsNamed(report.packetId))[0]!.live).toBe(false);
		expect((await alertsNamed(update.packetId))[0]!.live).toBe(true);
		const lines = await summariesOf(early.receipt.designation, 'alertReceived');
		expect(lines).toHaveLength(2);
		expect(lines[0]).toContain('started this transient');
		expect(lines[1]).toContain('already replaced');
	});

	it('a retraction before what it retracts is kept and holds when the report comes', async () => {
		const report = fresh();
		const { receipt } = await world.receive(gamma, {
			...report,
			packetId: `${String(report.packetId)}-r`,
			kind: 'retraction',
			shape: undefined,
			cites: [{ stream: 'tambour', packetId: report.packetId, relation: 'retraction' }]
		});
		const late = await world.receive(gamma, report);
		expect(late.receipt.designation).toBe(receipt.designation);
		expect((await alertsNamed(report.packetId))[0]!.live).toBe(false);
		expect(await summariesOf(receipt.designation, 'alertRetracted')).toEqual([
			`Tambour ${String(report.packetId)}-r, serial 1: retraction`
		]);
		const [line] = await summariesOf(receipt.designation, 'alertReceived');
		expect(line).toContain('already replaced');
	});

	it('an update that moves by ten degrees stays with its report and is put to a person', async () => {
		const report = fresh({ shape: circle(83.4, -8.2, 0.3) });
		const { receipt } = await world.receive(gamma, report);
		const moved = await world.receive(gamma, {
			...report,
			serial: 2,
			kind: 'update',
			shape: circle(83.4, 1.8, 0.3)
		});
		expect(moved.receipt.designation).toBe(receipt.designation);
		const [second] = (await alertsNamed(report.packetId)).filter(({ serial }) => serial === 2);
		expect(second).toMatchObject({ membership: 'provisional', live: true });
		const lines = await summariesOf(receipt.designation, 'alertReceived');
		expect(lines[1]).toContain('replaces a position that it does not agree with');
		expect(lines[1]).toContain('somebody should look');
	});
});

describe('a clock that is wrong and a way that is long', () => {
	const at = (offsetS: number) => new Date(+world.app.now() + offsetS * 1000).toISOString();

	it('a T0 up to an hour ahead is taken with a word in the journal', async () => {
		const sent = fresh();
		const { receipt } = await world.receive(gamma, { ...sent, t0: at(3600) });
		const [line] = await summariesOf(receipt.designation, 'alertReceived');
		expect(line).toContain('T0 is 3600 s after its receipt: a clock is wrong');
	});

	it('a T0 further ahead is refused at its field and waits in quarantine; no alert is made', async () => {
		const sent = fresh();
		await expect(world.receive(gamma, { ...sent, t0: at(3601) })).rejects.toMatchObject({
			code: 'invalid',
			errors: [{ pointer: '/t0' }]
		});
		expect(await lastPacket()).toMatchObject({ state: 'refused', code: 'invalid' });
		expect((await lastPacket()).detail).toContain('/t0');
		expect(await alertsNamed(sent.packetId)).toEqual([]);
	});

	it('one that comes days late is taken with a word; one of today without', async () => {
		const sent = fresh();
		const late = await world.receive(gamma, { ...sent, t0: at(-3 * 86_400) });
		const [line] = await summariesOf(late.receipt.designation, 'alertReceived');
		expect(line).toContain('it came 3.0 days after T0');
		const today = await world.receive(gamma, fresh());
		const [plain] = await summariesOf(today.receipt.designation, 'alertReceived');
		expect(plain).not.toMatch(/clock|after T0/);
	});
});
