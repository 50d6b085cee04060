import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { circle, circlePacket, openWorld, type World } from '../../../../tests/database/world';
import type { Actor } from '../actor';
import { transient } from '../db/schema/transients';
import type { AuthenticatedStream } from '../streams/streamKeyService';
import { mergeTransients, setMembership } from './regroupService';
import { transientDetail } from './transientDetail';

let world: World;
let gamma: AuthenticatedStream;
let xray: AuthenticatedStream;
let duty: Actor;

beforeAll(async () => {
	world = await openWorld();
	gamma = await world.stream('tambour', 'gamma');
	xray = await world.stream('carapace', 'wideXray');
	duty = await world.person('duty');
});
afterAll(() => world.close());

const states = async (designation: string) =>
	(
		await world.app.database
			.select({ state: transient.state })
			.from(transient)
			.where(eq(transient.designation, designation))
	)[0]!.state;

describe('regrouping', () => {
	it('splits an alert off and merges it back, and nothing is lost', async () => {
		const first = await world.receive(gamma, circlePacket());
		const second = await world.receive(
			xray,
			circlePacket({ packetId: 'CP-1', shape: circle(83.6, -8.4, 0.03) })
		);
		const home = first.receipt.designation;
		expect(second.receipt.designation).toBe(home);

		const split = await setMembership(world.app, duty, second.receipt.alertId, { action: 'split' });
		expect(split.designation).not.toBe(home);
		const left = await transientDetail(world.app, duty, home);
		const right = await transientDetail(world.app, duty, split.designation);
		expect(left.alerts.map((item) => item.packetId)).toEqual(['TB-1']);
		expect(left.transient.region!.area90Deg2).toBeCloseTo(Math.PI * 9, 1);
		expect(right.alerts.map((item) => item.packetId)).toEqual(['CP-1']);

		await mergeTransients(world.app, duty, split.designation, { into: home });
		const whole = await transientDetail(world.app, duty, home);
		expect(whole.alerts.map((item) => item.packetId)).toEqual(['TB-1', 'CP-1']);
		expect(whole.transient.region!.area90Deg2).toBeCloseTo(Math.PI * 0.03 ** 2, 4);
		expect(await states(split.designation)).toBe('closed');
		expect(await states(home)).toBe('open');
		expect(whole.journal.map((line) => line.kind)).toContain('merged');
	});

	it('does not split a lone alert, nor put a test with the real thing', async () => {
		const lone = await world.receive(
			gamma,
			circlePacket({ packetId: 'TB-2', shape: circle(10, 60, 2) })
		);
		await expect(
			setMembership(world.app, duty, lone.receipt.alertId, { action: 'split' })
		).rejects.toMatchObject({ code: 'wrongState' });
		const test = await world.receive(
			gamma,
			circlePacket({ packetId: 'TB-3', role: 'test', shape: circle(10, 60, 2) })
		);
		await expect(
			setMembership(world.app, duty, test.receipt.alertId, {
				action: 'move',
				to: lone.receipt.designation
			})
		).rejects.toMatchObject({ code: 'wrongState' });
	});
});
