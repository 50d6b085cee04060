import { existsSync, readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { transientRecordSchema } from '../../src/lib/domain/answers/transientRecord';
import type { Actor } from '../../src/lib/server/actor';
import { slot } from '../../src/lib/server/db/schema/slots';
import { reportSlot } from '../../src/lib/server/reports/reportService';
import { claimSlot, releaseSlot } from '../../src/lib/server/slots/slotService';
import { GET as observationsCsv } from '../../src/routes/api/v1/observations.csv/+server';
import { GET as observationsVot } from '../../src/routes/api/v1/observations.vot/+server';
import { GET as record } from '../../src/routes/api/v1/transients/[designation=designation]/+server';
import { GET as outlookCsv } from '../../src/routes/api/v1/transients/[designation=designation]/outlook.csv/+server';
import { GET as outlookVot } from '../../src/routes/api/v1/transients/[designation=designation]/outlook.vot/+server';
import { decideTransient, takeTransient } from '../../src/lib/server/transients/transientService';
import { circle, circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';
import { readByAstropy, votableFaults } from './votableCheckers';

let world: World;
let observer: Actor;
let designation: string;

const AWKWARD = '=HYPERLINK("http://x"), <b>&"\u0001';

beforeAll(async () => {
	world = await openWorld();
	const gamma = await world.stream('tambour', 'gamma');
	observer = await world.person('observer');
	await world.telescope('ALM', [observer]);
	await world.telescope('ALN', [observer], { name: AWKWARD });
	await world.telescope('ALP', [observer]);
	await world.telescope('FAR', [observer], { latDeg: 75, lonDeg: 20 });
	const { receipt } = await world.receive(gamma, circlePacket({ shape: circle(83.4, -8.2, 0.3) }));
	designation = receipt.designation;
	await world.runJobs();
	const duty = await world.person('duty');
	await takeTransient(world.app, duty, designation);
	await decideTransient(world.app, duty, designation, { decision: 'chase', reason: '' });
	await world.runJobs();
	await claim('ALM', 5);
	const released = await claim('ALN', 5);
	await releaseSlot(world.app, observer, released);
	const performed = await claim('ALN', 60);
	await reportSlot(world.app, observer, performed, {
		kind: 'limit',
		filter: 'R',
		observedAt: world.app.now().toISOString(),
		exposureS: 300,
		limitMag: 20.1,
		remarks: ''
	});
});
afterAll(() => world.close());

async function claim(telescopeCode: string, fromMinutes: number): Promise<string> {
	const startMs = world.app.now().getTime() + fromMinutes * 60_000;
	const { slotId } = await claimSlot(world.app, observer, {
		designation,
		telescopeCode,
		startAt: new Date(startMs).toISOString(),
		endAt: new Date(startMs + 30 * 60_000).toISOString(),
		filter: 'R'
	});
	return slotId;
}

type Handler = (event: never) => unknown;

async function get(handler: Handler, path = '/here', actor: Actor = observer): Promise<Response> {
	const event = routeEvent(world.app, { path, actor, params: { designation } });
	return (await handler(event as never)) as Response;
}

async function csvRows(handler: Handler, path?: string): Promise<Record<string, string>[]> {
	const answer = await get(handler, path);
	expect(answer.status).toBe(200);
	return parse(await answer.text(), { columns: true, record_delimiter: '\r\n' });
}

describe('a transient as JSON', () => {
	it('is what its schema says, without the region’s points', async () => {
		const answer = await get(record);
		expect(answer.status).toBe(200);
		const body = transientRecordSchema.parse(await answer.json());
		expect(body.designation).toBe(designation);
		expect(body.alerts[0]!.shape).toMatchObject({ kind: 'circle', radiusDeg: 0.3 });
		expect(body.outlook!.rows.map((row) => row.telescopeCode).sort()).toEqual([
			'ALM',
			'ALN',
			'ALP',
			'FAR'
		]);
		expect(body.reports).toMatchObject([{ kind: 'limit', limitMag: 20.1 }]);
		expect(body.journal.map((line) => line.kind)).toContain('slotReleased');
		expect(JSON.stringify(body)).not.toContain('"points"');
	});

	it('is not there for another designation', async () => {
		const event = routeEvent(world.app, { actor: observer, params: { designation: 'D26L01-zz' } });
		expect((await record(event as never)).status).toBe(404);
	});
});

describe('the outlook as a file', () => {
	it('as CSV has one line a telescope, ranked, with the reason of the one that can’t', async () => {
		const answer = await get(outlookCsv);
		expect(answer.headers.get('content-disposition')).toBe(
			`attachment; filename="duskline-${designation}-outlook.csv"`
		);
		expect(answer.headers.get('content-type')).toMatch(/^text\/csv/);
		const rows = await csvRows(outlookCsv);
		expect(rows.map((row) => row.rank)).toEqual(['1', '2', '3', '4']);
		expect(rows[3]).toMatchObject({ telescope_code: 'FAR', opens_at: '', altitude: '' });
		expect(rows[3]!.why_not).not.toBe('');
		expect(Number(rows[0]!.catch)).toBeGreaterThan(0);
		expect(Number(rows[0]!.ra)).toBeCloseTo(83.4, 1);
	});

	it('no cell that a person typed begins a formula', async () => {
		const rows = await csvRows(outlookCsv);
		expect(rows.find((row) => row.telescope_code === 'ALN')!.telescope).toBe(`'${AWKWARD}`);
	});

	it('as VOTable is valid by the IVOA’s schema', async () => {
		const text = await (await get(outlookVot)).text();
		expect(votableFaults(text) ?? '').toBe('');
	});

	it('as VOTable is read by astropy with the same values as the CSV', async () => {
		const table = readByAstropy(await (await get(outlookVot)).text());
		if (!table) return;
		const rows = await csvRows(outlookCsv);
		expect(table.names).toEqual(Object.keys(rows[0]!));
		expect(table.frames).toEqual(['ICRS', 'UTC', 'UTC']);
		expect(table.rows).toHaveLength(4);
		for (const name of ['catch', 'ra', 'altitude']) {
			const at = table.names.indexOf(name);
			expect(table.rows[0]![at]).toBe(Number(rows[0]![name]));
		}
		const named = table.rows.map((row) => row[table.names.indexOf('telescope')]);
		expect(named).toContain(AWKWARD.replace('\u0001', '\ufffd'));
	});
});

describe('observations as a file', () => {
	const COLUMNS = '../shared/standards/obsloctap-columns.csv';

	// A telescope here has a name that is not ASCII, which VOTable keeps in unicodeChar.
	it.skipIf(!existsSync(COLUMNS))(
		'has the columns of ObsLocTAP 1.0 with its units and UCDs',
		async () => {
			const columns: Record<string, string>[] = parse(readFileSync(COLUMNS, 'utf8'), {
				columns: true
			});
			const text = await (await get(observationsVot)).text();
			const fields = [...text.matchAll(/<FIELD ([^>]*)>/g)].map(([, attributes]) => {
				const of = (name: string) =>
					new RegExp(` ${name}="([^"]*)"`).exec(` ${attributes}`)?.[1] ?? '';
				return {
					column: of('name'),
					type: of('datatype').replace('unicodeChar', 'char'),
					unit: of('unit'),
					ucd: of('ucd')
				};
			});
			expect(fields).toEqual(
				columns.map(({ column, type, unit, ucd }) => ({ column, type, unit, ucd }))
			);
		}
	);

	it('is valid by the IVOA’s schema and read by astropy', async () => {
		const text = await (await get(observationsVot)).text();
		expect(votableFaults(text) ?? '').toBe('');
		const table = readByAstropy(text);
		if (!table) return;
		const rows = await csvRows(observationsCsv);
		expect(table.rows).toHaveLength(rows.length);
		const start = table.names.indexOf('t_min');
		expect(table.rows.map((row) => row[start])).toEqual(rows.map((row) => Number(row.t_min)));
	});

	it('says of each slot what became of it', async () => {
		const rows = await csvRows(observationsCsv);
		const statusOf = new Map(rows.map((row) => [row.obs_id!.slice(0, 36), row.execution_status]));
		const slots = await world.app.database.select().from(slot).where(eq(slot.state, 'claimed'));
		expect(statusOf.get(slots[0]!.id)).toBe('Scheduled');
		expect(new Set(statusOf.values())).toEqual(
			new Set(['Planned', 'Scheduled', 'Unscheduled', 'Performed'])
		);
		const performed = rows.filter((row) => row.execution_status === 'Performed');
		expect(new Set(performed.map((row) => row.t_exptime))).toEqual(new Set(['300']));
		const planned = rows.filter((row) => row.execution_status === 'Planned');
		expect(new Set(planned.map((row) => row.t_exptime))).toEqual(new Set(['']));
	});

	it('gives times as MJD and wavelengths in metres', async () => {
		const [first] = await csvRows(observationsCsv);
		// 2026-12-01 is MJD 61375: 60310 (2024-01-01) and 1065 days.
		expect(Math.floor(Number(first!.t_min))).toBe(61375);
		expect(first).toMatchObject({ em_min: '5.6e-7', em_max: '7.2e-7', target_name: designation });
	});

	it.each([
		['?to=2026-12-01T00:00:00Z', 0],
		['?from=2026-12-03T00:00:00Z', 0]
	])('%s leaves out what lies outside', async (query, count) => {
		expect(await csvRows(observationsCsv, `/here${query}`)).toHaveLength(count);
	});

	it('of one transient carries its name', async () => {
		const answer = await get(observationsCsv, `/here?designation=${designation}`);
		expect(answer.headers.get('content-disposition')).toContain(`${designation}-observations.csv`);
	});

	it.each(['?from=yesterday', '?designation=x', '?colour=red'])('%s is refused', async (query) => {
		expect((await get(observationsCsv, `/here${query}`)).status).toBe(422);
	});
});

describe('who may take these away', () => {
	it.each([
		['the record', record],
		['the outlook as CSV', outlookCsv],
		['the outlook as VOTable', outlookVot],
		['observations as CSV', observationsCsv],
		['observations as VOTable', observationsVot]
	])('not a partner: %s', async (_, handler) => {
		const partner = await world.person('partner');
		expect((await get(handler, '/here', partner)).status).toBe(403);
	});
});
