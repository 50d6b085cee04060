import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { desc, eq } from 'drizzle-orm';
import type { Actor } from '../../src/lib/server/actor';
import { region, transient } from '../../src/lib/server/db/schema/transients';
import { readFits } from '../../src/lib/server/fits/readFits';
import { readMocAscii, readMocJson } from '../../src/lib/server/skyFiles/mocText';
import { readMocTable } from '../../src/lib/server/skyFiles/readMocTable';
import { separationDeg } from '../../src/lib/sky/vector';
import { GET as getMap } from '../../src/routes/api/v1/transients/[designation=designation]/region.fits/+server';
import { GET as getMoc } from '../../src/routes/api/v1/transients/[designation=designation]/region.moc/+server';
import { circle, circlePacket, openWorld, type World } from '../database/world';
import { routeEvent } from './callRoute';

const PYTHON = '/usr/bin/python3';
const directory = mkdtempSync(join(tmpdir(), 'duskline-region-'));
let world: World;
let duty: Actor;
const made: Record<string, string> = {};

const hasAstropy = (() => {
	try {
		execFileSync(PYTHON, ['-c', 'import astropy'], { stdio: 'ignore' });
		return true;
	} catch {
		console.warn(
			'SKIPPED: region files are not checked by astropy, which is not installed (apt-get install python3-astropy python3-healpy)'
		);
		return false;
	}
})();

const ring = {
	kind: 'annulus',
	centre: { raDeg: 355, decDeg: 10 },
	radiusDeg: 20,
	halfWidthDeg: 2,
	containment: 0.9
};

beforeAll(async () => {
	world = await openWorld();
	duty = await world.person('duty');
	const gamma = await world.stream('tambour', 'gamma');
	const shapes: Record<string, unknown[]> = {
		wide: [circle(83.4, -8.2, 3)],
		arcseconds: [circle(210.5, 54.3, 2 / 3600)],
		two: [circle(10, 20, 3), circle(12, 21, 2)],
		ring: [ring],
		apart: [circle(40, 40, 1), circle(90, -40, 1)]
	};
	let day = 1;
	for (const [name, list] of Object.entries(shapes)) {
		const t0 = `2026-11-${String(day++).padStart(2, '0')}T03:00:00Z`;
		for (const [i, shape] of list.entries()) {
			const cites =
				i > 0 ? [{ stream: 'tambour', packetId: `${name}-0`, relation: 'followup' }] : [];
			const packet = circlePacket({ packetId: `${name}-${i}`, t0, shape, cites });
			made[name] = (await world.receive(gamma, packet)).receipt.designation;
		}
	}
});
afterAll(async () => {
	rmSync(directory, { recursive: true });
	await world.close();
});

async function call(get: unknown, path: string, designation: string, actor = duty) {
	const event = routeEvent(world.app, { path, params: { designation }, actor });
	const answer = await (get as (event: unknown) => Promise<Response>)(event);
	return { answer, bytes: new Uint8Array(await answer.arrayBuffer()) };
}
const moc = (designation: string, query = '') =>
	call(getMoc, `/api/v1/transients/${designation}/region.moc${query}`, designation);
const map = (designation: string) =>
	call(getMap, `/api/v1/transients/${designation}/region.fits`, designation);

async function storedRegion(designation: string) {
	const [row] = await world.app.database
		.select({ region })
		.from(region)
		.innerJoin(transient, eq(transient.id, region.transientId))
		.where(eq(transient.designation, designation))
		.orderBy(desc(region.version))
		.limit(1);
	return row!.region;
}

describe('GET region.moc', () => {
	it('gives the same area in three serialisations, 90 % or 50 %', async () => {
		const { moc50, moc90 } = await storedRegion(made.ring!);
		for (const [level, expected] of [
			['', moc90],
			['&level=90', moc90],
			['&level=50', moc50]
		] as const) {
			const fits = await moc(made.ring!, `?format=fits${level}`);
			expect(fits.answer.headers.get('content-type')).toBe('application/fits');
			expect(readMocTable(readFits(fits.bytes).tables[0]!)).toEqual(expected);
			const json = await moc(made.ring!, `?format=json${level}`);
			expect(readMocJson(new TextDecoder().decode(json.bytes))).toEqual(expected);
			const ascii = await moc(made.ring!, `?format=ascii${level}`);
			expect(readMocAscii(new TextDecoder().decode(ascii.bytes))).toEqual(expected);
		}
	});

	it('refuses what it does not know', async () => {
		for (const query of ['?format=xml', '?level=68', '?order=3']) {
			expect((await moc(made.ring!, query)).answer.status).toBe(422);
		}
		expect((await moc('D26A01-a')).answer.status).toBe(404);
		expect((await map('D26A01-a')).answer.status).toBe(404);
	});
});

describe.skipIf(!hasAstropy)('as astropy reads it', () => {
	const read = (bytes: Uint8Array) => {
		const path = join(directory, 'region.fits');
		writeFileSync(path, bytes);
		const script = 'tests/http/support/readWithAstropy.py';
		return JSON.parse(execFileSync(PYTHON, [script, path], { encoding: 'utf8' })) as Record<
			string,
			number
		>;
	};

	it.each(['wide', 'arcseconds', 'two', 'ring', 'apart'])(
		'the map of %s has all probability and the stored areas',
		{ timeout: 60_000 },
		async (name) => {
			const stored = await storedRegion(made[name]!);
			const { answer, bytes } = await map(made[name]!);
			expect(answer.status).toBe(200);
			const found = read(bytes);
			expect(found).toMatchObject({
				ordering: 'NUNIQ',
				coordsys: 'C',
				object: made[name],
				tiled: true,
				ascending: true
			});
			expect(found.sum).toBeCloseTo(1, 9);
			expect(Math.abs(found.area90Deg2! / stored.area90Deg2 - 1)).toBeLessThan(0.01);
			expect(Math.abs(found.area50Deg2! / stored.area50Deg2 - 1)).toBeLessThan(0.02);
			if (name === 'wide' && found.peakRaDeg !== undefined) {
				const peak = { raDeg: found.peakRaDeg, decDeg: found.peakDecDeg! };
				expect(separationDeg(peak, { raDeg: 83.4, decDeg: -8.2 })).toBeLessThan(0.3);
			}
		}
	);

	it('the coverage map has the area of its ranges', async () => {
		const { bytes } = await moc(made.ring!);
		const found = read(bytes);
		expect(found).toMatchObject({ ordering: 'RANGE', coordsys: 'C' });
		const { area90Deg2 } = await storedRegion(made.ring!);
		expect(found.areaDeg2! / area90Deg2).toBeGreaterThan(0.99);
		expect(found.areaDeg2! / area90Deg2).toBeLessThan(1.3);
	});
});
