import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { boardFor } from '../transients/board';
import { decideTransient, takeTransient } from '../transients/transientService';
import { reportSlot } from '../reports/reportService';
import { closure } from '../db/schema/network';
import { journal } from '../db/schema/transients';
import { slot } from '../db/schema/slots';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { claimSlot, releaseSlot, startSlot } from './slotService';

let world: World;
let gamma: AuthenticatedStream;
let duty: Actor;
let observers: Actor[];
let steward: Actor;
let designation: string;
let serial = 0;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	duty = await world.person('duty');
	steward = await world.person('steward');
	observers = await Promise.all(Array.from({ length: 30 }, () => world.person('observer')));
	for (const code of ['ALM', 'ALN', 'ALP', 'ALQ', 'ALR']) await world.telescope(code, observers);
	await world.telescope('FAR', observers, { latDeg: 75, lonDeg: 20 });
	const { receipt } = await world.receive(gamma, circlePacket({ shape: circle(83.4, -8.2, 0.3) }));
	designation = receipt.designation;
	await world.runJobs();
});
afterAll(() => world.close());

/** A claim that begins `fromMinutes` from now and lasts as long as asked. */
function claimOf(telescopeCode: string, fromMinutes = 5, minutes = 30) {
	const startMs = world.app.now().getTime() + fromMinutes * 60_000;
	return {
		designation,
		telescopeCode,
		startAt: new Date(startMs).toISOString(),
		endAt: new Date(startMs + minutes * 60_000).toISOString()
	};
}

describe('claims', () => {
	it('of overlapping times on one telescope, thirty at once: exactly one wins', async () => {
		const answers = await Promise.allSettled(
			observers.map((observer, index) =>
				claimSlot(world.app, observer, claimOf('ALM', 5 + (index % 10), 40))
			)
		);
		const won = answers.filter((item) => item.status === 'fulfilled');
		const lost = answers.filter((item) => item.status === 'rejected');
		expect(won).toHaveLength(1);
		expect(lost).toHaveLength(29);
		const rows = await world.app.database.select().from(slot).where(eq(slot.state, 'claimed'));
		expect(rows).toHaveLength(1);
		const winner = observers.find((item) => item.id === rows[0]!.claimedBy)!;
		for (const item of lost) {
			expect(item.reason).toMatchObject({
				code: 'slotTaken',
				extra: { heldBy: { name: winner.name, designation } }
			});
		}
	});

	it('of times that only touch are both good', async () => {
		await claimSlot(world.app, observers[0]!, claimOf('ALN', 5, 30));
		await expect(claimSlot(world.app, observers[1]!, claimOf('ALN', 35, 30))).resolves.toBeTruthy();
	});

	it('of a released slot can be made again', async () => {
		const { slotId } = await claimSlot(world.app, observers[0]!, claimOf('ALP'));
		await expect(releaseSlot(world.app, observers[1]!, slotId)).rejects.toMatchObject({
			code: 'notAllowed'
		});
		await releaseSlot(world.app, observers[0]!, slotId);
		const second = await claimSlot(world.app, observers[1]!, claimOf('ALP'));
		await releaseSlot(world.app, steward, second.slotId);
	});

	it('are refused where the telescope can’t point, in words', async () => {
		// 75° N in polar night: the target at declination −8° culminates at 7°.
		await expect(claimSlot(world.app, observers[0]!, claimOf('FAR'))).rejects.toMatchObject({
			code: 'unsafePointing',
			message: expect.stringContaining('safety officer') as string,
			extra: { limit: 'altitude' }
		});
		// Across dawn.
		await expect(
			claimSlot(world.app, observers[0]!, claimOf('ALP', 4 * 60, 60))
		).rejects.toMatchObject({ code: 'unsafePointing', extra: { limit: 'sun' } });
	});

	it('are refused while the site has closed the telescope, from the moment it is entered', async () => {
		const scope = await world.telescope('CLO', observers);
		const now = world.app.now().getTime();
		await world.app.database.insert(closure).values({
			telescopeId: scope.id,
			during: { start: new Date(now - 3_600_000), end: new Date(now + 7_200_000) },
			reason: 'wind'
		});
		await expect(claimSlot(world.app, observers[0]!, claimOf('CLO'))).rejects.toMatchObject({
			code: 'unsafePointing',
			extra: { limit: 'closure' }
		});
	});

	it('are for the observers of the telescope only', async () => {
		const stranger = await world.person('observer');
		await expect(claimSlot(world.app, stranger, claimOf('ALP'))).rejects.toMatchObject({
			code: 'notAllowed'
		});
		await expect(claimSlot(world.app, duty, claimOf('ALP'))).rejects.toMatchObject({
			code: 'notAllowed'
		});
		await expect(claimSlot(world.app, null, claimOf('ALP'))).rejects.toMatchObject({
			code: 'notSignedIn'
		});
	});

	it('are not for tests', async () => {
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: `T-${++serial}`, role: 'test', shape: circle(83.4, -8.2, 0.3) })
		);
		await world.runJobs();
		await expect(
			claimSlot(world.app, observers[0]!, { ...claimOf('ALP'), designation: receipt.designation })
		).rejects.toMatchObject({ code: 'wrongState' });
	});
});

describe('a slot', () => {
	it('goes from offer to claim to sky to report, and each step is in the journal', async () => {
		await takeTransient(world.app, duty, designation);
		await decideTransient(world.app, duty, designation, { decision: 'chase', reason: '' });
		const offered = (await boardFor(world.app, duty)).transients[0]!.slots.filter(
			(item) => item.state === 'offered'
		);
		expect(offered.map((item) => item.telescopeCode)).toContain('ALR');
		expect(offered.map((item) => item.telescopeCode)).not.toContain('FAR');

		const { slotId } = await claimSlot(world.app, observers[2]!, claimOf('ALR', 0, 20));
		expect(offered.find((item) => item.telescopeCode === 'ALR')!.id).toBe(slotId);
		world.tick(60);
		await startSlot(world.app, observers[2]!, slotId);
		world.tick(600);
		await reportSlot(world.app, observers[2]!, slotId, {
			kind: 'detection',
			filter: 'R',
			observedAt: world.app.now().toISOString(),
			exposureS: 120,
			magnitude: 19.3,
			magnitudeError: 0.05,
			remarks: ''
		});
		const [row] = await world.app.database.select().from(slot).where(eq(slot.id, slotId));
		expect(row!.state).toBe('reported');
		const lines = await world.app.database
			.select()
			.from(journal)
			.where(eq(journal.transientId, row!.transientId))
			.orderBy(journal.id);
		expect(lines.slice(-3).map((line) => line.kind)).toEqual(['slotClaimed', 'onSky', 'reported']);
		await expect(releaseSlot(world.app, observers[2]!, slotId)).rejects.toMatchObject({
			code: 'wrongState'
		});
	});

	it('can’t be on sky long before it begins', async () => {
		const { slotId } = await claimSlot(world.app, observers[3]!, claimOf('ALP', 60, 20));
		await expect(startSlot(world.app, observers[3]!, slotId)).rejects.toMatchObject({
			code: 'wrongState'
		});
		await releaseSlot(world.app, observers[3]!, slotId);
	});

	it('is reported once when the button is pressed twice', async () => {
		const { slotId } = await claimSlot(world.app, observers[0]!, claimOf('ALQ', 0, 20));
		const press = () =>
			reportSlot(world.app, observers[0]!, slotId, {
				kind: 'weather',
				observedAt: world.app.now().toISOString(),
				remarks: 'fog'
			});
		const both = await Promise.allSettled([press(), press()]);
		expect(both.filter((item) => item.status === 'fulfilled')).toHaveLength(1);
	});
});

describe('taking and deciding', () => {
	it('the first of two who take at once has it, the other is told who', async () => {
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: `D-${++serial}`, shape: circle(200, 30, 2) })
		);
		const other = await world.person('duty');
		const both = await Promise.allSettled([
			takeTransient(world.app, duty, receipt.designation),
			takeTransient(world.app, other, receipt.designation)
		]);
		const lost = both.filter((item) => item.status === 'rejected');
		expect(lost).toHaveLength(1);
		expect(lost[0]!.reason).toMatchObject({ code: 'alreadyTaken' });
	});

	it('needs a take before a decision, and a reason to change one', async () => {
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: `D-${++serial}`, shape: circle(250, -40, 2) })
		);
		const { designation: name } = receipt;
		const decide = (decision: 'chase' | 'park', reason = '') =>
			decideTransient(world.app, duty, name, { decision, reason });
		await expect(decide('park')).rejects.toMatchObject({ code: 'wrongState' });
		await takeTransient(world.app, duty, name);
		await decide('park');
		await expect(decide('chase')).rejects.toMatchObject({ code: 'invalid' });
		await expect(decide('chase', 'an X-ray position came')).resolves.toMatchObject({
			decision: 'chase'
		});
	});
});

describe('the board', () => {
	it('tells with `since` only what changed, and always names all that is open', async () => {
		const whole = await boardFor(world.app, duty);
		const { receipt } = await world.receive(
			gamma,
			circlePacket({ packetId: `S-${++serial}`, shape: circle(10, 50, 2) })
		);
		const after = await boardFor(world.app, duty, whole.revision);
		expect(after.revision).toBeGreaterThan(whole.revision);
		expect(after.transients.map((item) => item.designation)).toEqual([receipt.designation]);
		expect(after.openDesignations).toHaveLength(whole.openDesignations.length + 1);
	});

	it('ranks telescopes and says why one can’t observe', async () => {
		const board = await boardFor(world.app, duty);
		const shown = board.transients.find((item) => item.designation === designation)!;
		const rows = shown.outlook!.rows;
		expect(rows.map((row) => row.catch)).toEqual(
			rows.map((row) => row.catch).sort((a, b) => b - a)
		);
		const far = rows.find((row) => row.telescopeCode === 'FAR')!;
		expect(far.windows).toEqual([]);
		expect(far.whyNot).toMatch(/never high enough/);
		expect(shown.outlook!.regionVersion).toBe(shown.region!.version);
	});
});
