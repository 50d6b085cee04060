import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import { alert, packet } from '../db/schema/alerts';
import { journal, region, transient } from '../db/schema/transients';
import { decideTransient, takeTransient } from '../transients/transientService';
import type { AuthenticatedStream } from '../streams/streamKeyService';

let world: World;
let gamma: AuthenticatedStream;
let xray: AuthenticatedStream;
let serialNumber = 0;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	xray = await world.stream('carapace', 'wideXray');
});
afterAll(() => world.close());
// Each test has a day of its own, so that none sees another's transients.
beforeEach(() => void serialNumber++);

const day = () => `2026-11-${String(serialNumber).padStart(2, '0')}`;
const t0 = (clock = '03:41:27') => `${day()}T${clock}Z`;
const packetId = (name: string) => `${name}-${serialNumber}`;

/** A packet that retracts Tambour's A. */
const retractionOfA = () => ({
	packetId: packetId('R'),
	serial: 1,
	role: 'observation',
	kind: 'retraction',
	t0: t0(),
	cites: [{ stream: 'tambour', packetId: packetId('A'), relation: 'retraction' }]
});

async function versions(designation: string) {
	return world.app.database
		.select({
			version: region.version,
			area90Deg2: region.area90Deg2,
			odds: region.logOddsAgreement
		})
		.from(region)
		.innerJoin(transient, eq(transient.id, region.transientId))
		.where(eq(transient.designation, designation))
		.orderBy(region.version);
}

describe('a packet', () => {
	it('starts a transient named by the day of T0 in order of arrival', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const far = circlePacket({ packetId: packetId('B'), t0: t0(), shape: circle(200, 40, 3) });
		const second = await world.receive(gamma, far);
		expect(first.isNew).toBe(true);
		expect(first.receipt.designation).toBe(`D26K${day().slice(-2)}-a`);
		expect(second.receipt.designation).toBe(`D26K${day().slice(-2)}-b`);
	});

	it('is one alert when it comes twice, with the same receipt', async () => {
		const input = circlePacket({ packetId: packetId('A'), t0: t0() });
		const first = await world.receive(gamma, input);
		world.tick(5);
		const again = await world.receive(gamma, input);
		expect(again.isNew).toBe(false);
		expect(again.receipt).toEqual(first.receipt);
		const reordered = Object.fromEntries(Object.entries(input).reverse());
		expect((await world.receive(gamma, reordered)).receipt).toEqual(first.receipt);
	});

	it('is one alert when twenty copies come at once', async () => {
		const input = circlePacket({ packetId: packetId('A'), t0: t0() });
		const all = await Promise.all(Array.from({ length: 20 }, () => world.receive(gamma, input)));
		expect(all.filter((item) => item.isNew)).toHaveLength(1);
		expect(new Set(all.map((item) => item.receipt.alertId)).size).toBe(1);
		const kept = await world.app.database
			.select()
			.from(alert)
			.where(eq(alert.packetId, packetId('A')));
		expect(kept).toHaveLength(1);
	});

	it('is refused when another body has its id and serial; it is kept, but no alert is made', async () => {
		await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const before = await world.app.database.$count(alert);
		const other = circlePacket({ packetId: packetId('A'), t0: t0(), significance: 9 });
		await expect(world.receive(gamma, other)).rejects.toMatchObject({ code: 'packetConflict' });
		expect(await world.app.database.$count(alert)).toBe(before);
	});

	it('is kept byte for byte', async () => {
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: packetId('A'), t0: t0() })
		);
		const [row] = await world.app.database
			.select({ body: packet.body })
			.from(packet)
			.innerJoin(alert, eq(alert.rawId, packet.id))
			.where(eq(alert.id, receipt.alertId));
		expect(JSON.parse(row!.body.toString())).toEqual(
			circlePacket({ packetId: packetId('A'), t0: t0() })
		);
	});
});

describe('association', () => {
	it('joins a position inside the circle, shrinks the region and says how well they agree', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const refined = circlePacket({
			packetId: packetId('B'),
			t0: t0('03:41:40'),
			shape: circle(83.6, -8.4, 0.03)
		});
		const second = await world.receive(xray, refined);
		expect(second.receipt.designation).toBe(first.receipt.designation);
		const [before, after] = await versions(first.receipt.designation);
		// The circle alone has the flat-sky area pi r^2 within the curvature of 3 degrees.
		expect(before!.area90Deg2).toBeCloseTo(Math.PI * 9, 1);
		expect(after!.area90Deg2).toBeCloseTo(Math.PI * 0.03 ** 2, 4);
		expect(before!.odds).toBeNull();
		expect(after!.odds).toBeGreaterThan(Math.log(10));
	});

	it('starts another transient for a position far outside the circle', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const elsewhere = circlePacket({
			packetId: packetId('B'),
			t0: t0(),
			shape: circle(120, -8.4, 0.03)
		});
		const second = await world.receive(xray, elsewhere);
		expect(second.receipt.designation).not.toBe(first.receipt.designation);
	});

	it('starts another transient for a position inside the circle a day later', async () => {
		const first = await world.receive(
			gamma,
			circlePacket({ packetId: packetId('A'), t0: t0('00:10:00') })
		);
		const later = circlePacket({
			packetId: packetId('B'),
			t0: t0('23:50:00'),
			shape: circle(83.6, -8.4, 0.03)
		});
		expect((await world.receive(xray, later)).receipt.designation).not.toBe(
			first.receipt.designation
		);
	});

	it('puts two alerts of one burst that come at once into one transient', async () => {
		const [one, two] = await Promise.all([
			world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() })),
			world.receive(
				xray,
				circlePacket({ packetId: packetId('B'), t0: t0(), shape: circle(83.6, -8.4, 0.03) })
			)
		]);
		expect(one.receipt.designation).toBe(two.receipt.designation);
	});

	it('never puts a test with a real alert', async () => {
		const real = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const test = await world.receive(
			gamma,
			circlePacket({ packetId: packetId('B'), t0: t0(), role: 'test' })
		);
		expect(test.receipt.designation).not.toBe(real.receipt.designation);
		const [row] = await world.app.database
			.select({ isTest: transient.isTest })
			.from(transient)
			.where(eq(transient.designation, test.receipt.designation));
		expect(row!.isTest).toBe(true);
	});

	it('follows a citation even where the positions do not agree', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const cites = [{ stream: 'tambour', packetId: packetId('A'), relation: 'followup' }];
		const away = circlePacket({
			packetId: packetId('B'),
			t0: t0(),
			cites,
			shape: circle(120, 20, 0.03)
		});
		const second = await world.receive(xray, away);
		expect(second.receipt.designation).toBe(first.receipt.designation);
		const all = await versions(first.receipt.designation);
		expect(all.at(-1)!.odds).toBeLessThan(Math.log(1 / 10));
		expect(Number.isFinite(all.at(-1)!.area90Deg2)).toBe(true);
	});
});

describe('updates and retractions', () => {
	it('a higher serial replaces the earlier one', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const better = circlePacket({
			packetId: packetId('A'),
			serial: 2,
			kind: 'update',
			t0: t0(),
			shape: circle(83.4, -8.2, 1)
		});
		await world.receive(gamma, better);
		const all = await versions(first.receipt.designation);
		expect(all.at(-1)!.area90Deg2).toBeCloseTo(Math.PI, 2);
		expect(all.at(-1)!.odds).toBeNull();
	});

	it('an earlier serial that comes late changes nothing', async () => {
		const shape = circle(83.4, -8.2, 1);
		const later = circlePacket({
			packetId: packetId('A'),
			serial: 2,
			kind: 'update',
			t0: t0(),
			shape
		});
		const first = await world.receive(gamma, later);
		await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const all = await versions(first.receipt.designation);
		expect(all.at(-1)!.area90Deg2).toBeCloseTo(Math.PI, 2);
	});

	it('a retraction withdraws its part; without live alerts the transient is closed as retracted', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const { receipt } = await world.receive(gamma, retractionOfA());
		expect(receipt.designation).toBe(first.receipt.designation);
		const [row] = await world.app.database
			.select()
			.from(transient)
			.where(eq(transient.designation, receipt.designation));
		expect(row!.state).toBe('retracted');
		const lines = await world.app.database
			.select({ kind: journal.kind })
			.from(journal)
			.where(eq(journal.transientId, row!.id))
			.orderBy(journal.id);
		expect(lines.map((line) => line.kind)).toEqual([
			'alertReceived',
			'regionChanged',
			'alertRetracted',
			'retracted'
		]);
	});

	it('a retraction by another stream is heard, and the alert it names stands', async () => {
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const { receipt } = await world.receive(xray, retractionOfA());
		expect(receipt.designation).toBe(first.receipt.designation);
		const [row] = await world.app.database
			.select()
			.from(transient)
			.where(eq(transient.designation, receipt.designation));
		expect(row!.state).toBe('open');
		const lines = await world.app.database
			.select({ summary: journal.summary })
			.from(journal)
			.where(eq(journal.transientId, row!.id));
		expect(lines.map(({ summary }) => summary).join('\n')).toContain('which stands');
	});

	it('a retraction that overtakes its report still holds when the report arrives', async () => {
		await world.receive(gamma, retractionOfA());
		const late = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const [row] = await world.app.database
			.select()
			.from(transient)
			.where(eq(transient.designation, late.receipt.designation));
		expect(row!.state).toBe('retracted');
	});
});

describe('a dropped transient', () => {
	it('asks to be taken again when a new alert comes', async () => {
		const duty = await world.person('duty');
		const first = await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const { designation } = first.receipt;
		await takeTransient(world.app, duty, designation);
		await decideTransient(world.app, duty, designation, { decision: 'drop', reason: '' });
		const shape = circle(83.6, -8.4, 0.03);
		await world.receive(xray, circlePacket({ packetId: packetId('B'), t0: t0(), shape }));
		const [row] = await world.app.database
			.select()
			.from(transient)
			.where(eq(transient.designation, designation));
		expect(row).toMatchObject({ state: 'open', decision: null, takenBy: null });
	});
});

describe('the journal', () => {
	it('can be neither changed nor emptied', async () => {
		await world.receive(gamma, circlePacket({ packetId: packetId('A'), t0: t0() }));
		const { database } = world.app;
		await expect(database.update(journal).set({ summary: 'other' })).rejects.toThrow();
		await expect(database.delete(journal)).rejects.toThrow();
	});
});
