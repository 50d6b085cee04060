import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openCircularWorld, type CircularWorld } from '../../../../tests/database/circularWorld';
import type { JournalKind } from '../../domain/vocabulary';
import type { ResponseStep } from '../../domain/response';
import type { Actor } from '../actor';
import { writeJournal } from '../transients/journalStore';
import { responseCsv, responseCsvName } from './responseCsv';
import { responseTables } from './responseService';

let world: CircularWorld;
let pi: Actor;

beforeAll(async () => {
	world = await openCircularWorld();
	pi = await world.person(['pi']);
});
afterAll(() => world.close());

type Event = [kind: JournalKind, afterS: number, detail?: Record<string, unknown>];

/** A transient with these journal entries, in seconds after T0. */
async function story(
	designation: string,
	t0: Date,
	events: Event[],
	values: { isTest?: boolean; isDrill?: boolean } = {}
): Promise<void> {
	const transientId = await world.transient(designation, { t0, ...values });
	await writeJournal(
		world.app.database,
		...events.map(([kind, afterS, detail = {}]) => ({
			transientId,
			kind,
			at: new Date(t0.getTime() + afterS * 1000),
			actorId: null,
			summary: kind,
			detail
		}))
	);
}

describe('the response tables of a journal worked out by hand', () => {
	const t0 = new Date('2026-12-01T02:00:00Z');
	const now = new Date(t0.getTime() + 7_200_000);
	const app = () => ({ ...world.app, now: () => now });
	const chase = { decision: 'chase' };

	beforeAll(async () => {
		await world.stream('tambour');
		await world.stream('needle');
		const almendra = { telescopeId: await world.telescope('ALM', '=Almendra, "big"') };
		const drakenskop = { telescopeId: await world.telescope('DRK', 'Drakenskop') };
		const tambour = { stream: 'tambour' };
		const needle = { stream: 'needle' };
		await story('D26L01-a', t0, [
			['alertReceived', 20, tambour],
			['alertReceived', 90, needle],
			['taken', 120],
			['decided', 300, chase],
			['slotClaimed', 400, almendra],
			['onSky', 1000, almendra],
			// A partner was faster; that says nothing of the team.
			['reported', 1500, { partner: true }],
			['circularPublished', 1600],
			['reported', 4000, almendra],
			['circularPublished', 5000]
		]);
		await story('D26L01-b', t0, [
			['alertReceived', 40, needle],
			['taken', 240],
			['slotClaimed', 300, drakenskop],
			['decided', 360, chase],
			['onSky', 1200, drakenskop]
		]);
		await story('D26L01-c', t0, [
			['alertReceived', 60, tambour],
			['taken', 600],
			['decided', 660, { decision: 'drop' }],
			['closed', 2460]
		]);
		await story('D26L01-d', t0, [
			['alertReceived', 30, needle],
			['alertRetracted', 330],
			['retracted', 330]
		]);
		await story('D26L01-e', t0, [['alertReceived', 50, tambour]]);
		const fast: Event[] = [
			['alertReceived', 1, tambour],
			['taken', 2],
			['decided', 3, chase],
			['slotClaimed', 4, almendra],
			['onSky', 5, almendra]
		];
		await story('D26L01-f', t0, fast, { isDrill: true });
		await story('D26L01-g', t0, fast, { isTest: true });
		await story('D26A01-a', new Date('2026-01-01T00:00:00Z'), fast);
	});

	it('counts each step with its median, nine in ten where reached, and what is still open', async () => {
		const { rows, transients } = await responseTables(app(), pi, { days: 30 });
		expect(transients).toBe(5);
		const found = rows.map(({ step, count, stillOpen, medianS, percentile90S }) => [
			step,
			count,
			stillOpen,
			medianS,
			percentile90S
		]);
		expect(found).toEqual([
			['triggerToReceived', 5, 0, 40, 60],
			// 1/5 and 1/4 and, after the retraction at 300 s, 1/2 of the rest: 0.8, 0.6, 0.3.
			['receivedToTaken', 5, 2, 540, null],
			['takenToDecision', 3, 0, 120, 180],
			// One observer claimed before the decision: no wait. The dropped one never began.
			['decisionToClaim', 2, 0, 50, 100],
			['claimToExposure', 2, 0, 750, 900],
			['exposureToReport', 2, 1, 3000, null],
			['reportToCircular', 1, 0, 1000, 1000]
		]);
	});

	it('draws the wait for a first exposure with those who still wait as ticks', async () => {
		const { curve } = await responseTables(app(), pi, { days: 30 });
		expect(curve).toMatchObject({ count: 5, ended: 2, medianS: 1200 });
		expect(curve.steps.map(({ timeS }) => timeS)).toEqual([1000, 1200]);
		expect(curve.steps[0]!.share).toBeCloseTo(2 / 3, 12);
		expect(curve.steps[1]!.share).toBeCloseTo(1 / 3, 12);
		expect(curve.censored.map(({ timeS }) => timeS)).toEqual([330, 660, 7200]);
		expect(curve.censored[2]!.share).toBeCloseTo(1 / 3, 12);
	});

	it('divides by telescope and by the stream heard first, and tests whether they differ', async () => {
		const byTelescope = await responseTables(app(), pi, { days: 30, by: 'telescope' });
		const cells = byTelescope.rows.map(({ group, step, medianS }) => [group, step, medianS]);
		expect(cells).toEqual([
			['=Almendra, "big"', 'claimToExposure', 600],
			['=Almendra, "big"', 'exposureToReport', 3000],
			['=Almendra, "big"', 'reportToCircular', 1000],
			['Drakenskop', 'claimToExposure', 900],
			['Drakenskop', 'exposureToReport', null]
		]);
		// Two samples of one: expected 1/2 + 0 and 1/2 + 1, variance 1/4, so χ² = (1/2)² / (1/4) = 1.
		const claimed = byTelescope.differences.find(({ step }) => step === 'claimToExposure')!;
		expect(claimed.chiSquare).toBeCloseTo(1, 12);
		expect(claimed.pValue).toBeCloseTo(0.31731, 5);
		const byStream = await responseTables(app(), pi, { days: 30, by: 'stream' });
		const begun = (group: string, step: ResponseStep) =>
			byStream.rows.find((row) => row.group === group && row.step === step)?.count;
		expect(begun('Tambour', 'triggerToReceived')).toBe(3);
		expect(begun('Needle', 'triggerToReceived')).toBe(2);
	});

	it('can be downloaded as CSV that a spreadsheet reads and does not run', async () => {
		const tables = await responseTables(app(), pi, { days: 30, by: 'telescope' });
		const lines = responseCsv(tables).split('\r\n');
		expect(lines[0]).toBe(
			'telescope,step,begun,still_open,median_s,median_lower95_s,median_upper95_s,percentile90_s'
		);
		expect(lines[1]).toMatch(/^"'=Almendra, ""big""",Claim to first exposure,1,0,600,/);
		expect(lines[5]).toBe('Drakenskop,First exposure to report,1,1,,,,');
		expect(lines.at(-1)).toBe('');
		expect(responseCsvName(tables)).toBe('duskline-response-2026-12-01-30d-by-telescope.csv');
	});

	it('is for the team only', async () => {
		const partner = await world.person(['partner']);
		await expect(responseTables(app(), partner, { days: 30 })).rejects.toMatchObject({
			code: 'notAllowed'
		});
		await expect(responseTables(app(), null, { days: 30 })).rejects.toMatchObject({
			code: 'notSignedIn'
		});
	});
});

describe('the curve of a journal with the classic 6-MP times', () => {
	it('is the one that R survival draws', async () => {
		type Sample = {
			name: string;
			time: number[];
			status: number[];
			event_times: number[];
			survival: number[];
			ci95_loglog_lower: number[];
			ci95_loglog_upper: number[];
			median: number;
			median_ci95_loglog: (number | null)[];
		};
		const { samples } = JSON.parse(readFileSync('fixtures/reference/survival.json', 'utf8')) as {
			samples: Sample[];
		};
		const sample = samples.find(({ name }) => name === '6-MP')!;
		const t0 = new Date('2027-06-01T00:00:00Z');
		for (const [index, hours] of sample.time.entries()) {
			await story(`D27F01-${String.fromCharCode(97 + index)}`, t0, [
				['alertReceived', 30],
				[sample.status[index] === 1 ? 'onSky' : 'closed', hours * 3600]
			]);
		}
		const now = new Date(t0.getTime() + 40 * 3_600_000);
		const { curve } = await responseTables({ ...world.app, now: () => now }, pi, { days: 30 });
		expect(curve.steps.map(({ timeS }) => timeS / 3600)).toEqual(sample.event_times);
		curve.steps.forEach(({ share, lower, upper }, index) => {
			expect(share).toBeCloseTo(sample.survival[index]!, 6);
			expect(lower).toBeCloseTo(sample.ci95_loglog_lower[index]!, 6);
			expect(upper).toBeCloseTo(sample.ci95_loglog_upper[index]!, 6);
		});
		expect(curve.medianS! / 3600).toBe(sample.median);
		expect(curve.medianLowerS! / 3600).toBe(sample.median_ci95_loglog[0]);
		expect(curve.medianUpperS).toBeNull();
	});
});
