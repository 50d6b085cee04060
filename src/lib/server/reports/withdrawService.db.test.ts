import { desc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { report } from '../db/schema/slots';
import { journal, region, transient } from '../db/schema/transients';
import { claimSlot } from '../slots/slotService';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { boardTransients } from '../transients/boardRows';
import { requireTransient } from '../transients/transientStore';
import { readCircularRecord } from '../circulars/circularRecord';
import { reportSlot } from './reportService';
import { withdrawReport } from './withdrawService';

let world: World;
let gamma: AuthenticatedStream;
let observer: Actor;
let steward: Actor;
let serial = 0;

const wideField = (offsetXDeg: number) => [
	{
		shape: 'rectangle' as const,
		widthDeg: 1.5,
		heightDeg: 1.5,
		rotationDeg: 0,
		offsetXDeg,
		offsetYDeg: 0
	}
];

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	observer = await world.person('observer');
	steward = await world.person('steward');
});
afterAll(() => world.close());

/** A transient in a 3° circle that two telescopes of its own have looked at, one report each still to come. */
async function lookedAt(): Promise<{ designation: string; slotIds: [string, string] }> {
	serial += 1;
	const letter = String.fromCharCode(64 + serial);
	for (const last of ['X', 'Y']) {
		await world.telescope(`W${letter}${last}`, [observer], {
			detectors: wideField(last === 'X' ? 0 : 0.4),
			maxTiles: last === 'X' ? 2 : 4
		});
	}
	const { receipt } = await world.receive(
		gamma,
		circlePacket({
			packetId: `N-${serial}`,
			t0: new Date(world.app.now().getTime() - 30 * 60_000 - serial * 86_400_000).toISOString(),
			shape: circle(83.4, -8.2, 3)
		})
	);
	await world.runJobs();
	const claim = async (code: string) => {
		const { slotId } = await claimSlot(world.app, observer, {
			designation: receipt.designation,
			telescopeCode: code,
			startAt: world.app.now().toISOString(),
			endAt: new Date(world.app.now().getTime() + 20 * 60_000).toISOString()
		});
		return slotId;
	};
	return {
		designation: receipt.designation,
		slotIds: [await claim(`W${letter}X`), await claim(`W${letter}Y`)]
	};
}

const reportLimit = async (slotId: string, limitMag = 24) =>
	(
		await reportSlot(world.app, observer, slotId, {
			kind: 'limit',
			filter: 'R',
			observedAt: world.app.now().toISOString(),
			exposureS: 120,
			limitMag,
			remarks: ''
		})
	).reportId;

async function regionOf(designation: string) {
	const [row] = await world.app.database
		.select({ region })
		.from(region)
		.innerJoin(transient, eq(transient.id, region.transientId))
		.where(eq(transient.designation, designation))
		.orderBy(desc(region.version))
		.limit(1);
	// What the region is, apart from when and why it was made.
	const { id, version, cause, computedAt, transientId, ...rest } = row!.region;
	return { about: { id, version, cause, computedAt, transientId }, ...rest };
}

const onBoard = async (designation: string) =>
	(
		await boardTransients(world.app.database, [
			await requireTransient(world.app.database, designation)
		])
	)[0]!;

describe('a report of nothing', () => {
	it('moves the region, and its withdrawal restores it exactly', async () => {
		const { designation, slotIds } = await lookedAt();
		const { about: aboutBefore, ...before } = await regionOf(designation);
		expect(before.tooFaintChance).toBeNull();

		const reportId = await reportLimit(slotIds[0]);
		const { about, ...after } = await regionOf(designation);
		expect(about.version).toBe(aboutBefore.version + 1);
		expect(about.cause).toBe('Telescope WAX saw nothing to R 24.0');
		expect(after.area50Deg2).toBeGreaterThan(before.area50Deg2);
		expect(after.notFoundCount).toBe(1);
		expect(after.tooFaintChance).toBeGreaterThan(0);
		expect(after.tooFaintChance).toBeLessThan(1);
		expect(after.points.probability.reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 9);
		const shown = await onBoard(designation);
		expect(shown.region!.searched).toEqual({ reports: 1, tooFaintChance: after.tooFaintChance });
		expect(world.waitingJobs()).toContain('outlook.refresh');
		await world.runJobs();
		expect((await onBoard(designation)).outlook!.regionVersion).toBe(about.version);

		await withdrawReport(world.app, observer, reportId, 'wrong field');
		const { about: aboutRestored, ...restored } = await regionOf(designation);
		expect(aboutRestored.version).toBe(about.version + 1);
		expect(restored).toEqual(before);
		const lines = await world.app.database
			.select()
			.from(journal)
			.where(eq(journal.transientId, about.transientId))
			.orderBy(journal.id);
		const line = lines.find(({ kind }) => kind === 'reportWithdrawn')!;
		expect(line.summary).toBe(
			'Report of Telescope WAX withdrawn (Upper limit, R > 24.00): wrong field'
		);
		expect(lines.some(({ kind }) => kind === 'reported')).toBe(true);
	});

	it('gives the same region whichever of two comes first', async () => {
		const { designation, slotIds } = await lookedAt();
		const one = await reportLimit(slotIds[0], 23);
		await reportLimit(slotIds[1], 21);
		const { about: _, ...both } = await regionOf(designation);
		expect(both.notFoundCount).toBe(2);
		// Without the first, then with it again: now it is the second to come.
		await withdrawReport(world.app, observer, one, 'by mistake');
		const { about: __, ...single } = await regionOf(designation);
		expect(single.area90Deg2).not.toBe(both.area90Deg2);
		const [row] = await world.app.database.select().from(report).where(eq(report.id, one));
		const { id: ___, withdrawnAt: ____, withdrawnBy: _____, ...again } = row!;
		await world.app.database
			.insert(report)
			.values({ ...again, reportedAt: world.app.now(), observedAt: row!.observedAt });
		await world.receive(
			gamma,
			circlePacket({
				packetId: `N-${serial}`,
				serial: 2,
				kind: 'update',
				t0: new Date(world.app.now().getTime() - 30 * 60_000 - serial * 86_400_000).toISOString(),
				shape: circle(83.4, -8.2, 3)
			})
		);
		const { about: ______, ...reversed } = await regionOf(designation);
		expect(reversed).toEqual(both);
	});

	it('does not open a transient that is closed', async () => {
		const { designation, slotIds } = await lookedAt();
		await world.app.database
			.update(transient)
			.set({ state: 'closed' })
			.where(eq(transient.designation, designation));
		await reportLimit(slotIds[0]);
		expect((await requireTransient(world.app.database, designation)).state).toBe('closed');
		expect((await regionOf(designation)).notFoundCount).toBe(1);
	});
});

describe('a withdrawn report', () => {
	it('counts nowhere; who made it or a steward withdraws it, nobody else', async () => {
		const { designation, slotIds } = await lookedAt();
		const { reportId } = await reportSlot(world.app, observer, slotIds[0], {
			kind: 'detection',
			filter: 'R',
			observedAt: world.app.now().toISOString(),
			magnitude: 19.3,
			magnitudeError: 0.1,
			remarks: ''
		});
		const subject = await requireTransient(world.app.database, designation);
		expect((await onBoard(designation)).headline).toContain('counterpart');
		const other = await world.person('observer');
		await expect(withdrawReport(world.app, other, reportId, 'mine?')).rejects.toMatchObject({
			code: 'notAllowed'
		});
		const duty = await world.person('duty');
		await expect(withdrawReport(world.app, duty, reportId, 'no')).rejects.toMatchObject({
			code: 'notAllowed'
		});
		const version = (await regionOf(designation)).about.version;
		await withdrawReport(world.app, steward, reportId, 'an asteroid');
		await withdrawReport(world.app, steward, reportId, 'pressed twice');
		const shown = await onBoard(designation);
		expect(shown.headline).not.toContain('counterpart');
		expect(shown.reports).toEqual([]);
		const now = world.app.now();
		const record = await readCircularRecord(world.app.database, subject, duty.id, now);
		expect(record.reports).toEqual([]);
		expect((await regionOf(designation)).about.version).toBe(version);
		const lines = await world.app.database
			.select()
			.from(journal)
			.where(eq(journal.transientId, subject.id));
		expect(lines.filter(({ kind }) => kind === 'reportWithdrawn')).toHaveLength(1);
	});
});
