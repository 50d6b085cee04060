import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
	NOW,
	openCircularWorld,
	type CircularWorld
} from '../../../../tests/database/circularWorld';
import { partnerReportFormSchema, type PartnerReport } from '../../domain/partnerReport';
import { preferencesFormSchema } from '../../domain/preferences';
import type { Actor } from '../actor';
import { publishCircular } from '../circulars/circularService';
import { report } from '../db/schema/slots';
import { journal } from '../db/schema/transients';
import { listOwnReports, reportableTransients, reportAsPartner } from './partnerReportService';
import { preferencesView, savePreferences } from './preferencesService';

let world: CircularWorld;
let duty: Actor;
let partner: Actor;
let other: Actor;

beforeAll(async () => {
	world = await openCircularWorld();
	duty = await world.person(['duty']);
	partner = await world.person(['partner']);
	other = await world.person(['partner']);
	await world.stream('tambour');
	await world.telescope('ALM', 'Cerro Almendra');
	await world.transient('D26L01-a');
	await world.transient('D26L01-b');
	await publishCircular(world.app, duty, {
		draftId: randomUUID(),
		designation: 'D26L01-a',
		title: 'A title',
		body: 'A text'
	});
});
afterAll(() => world.close());

const limit = (values: Partial<PartnerReport> = {}): PartnerReport => ({
	reportId: randomUUID(),
	designation: 'D26L01-a',
	kind: 'limit',
	filter: 'R',
	observedAt: '2026-12-01T04:00:00Z',
	limitMag: 20.5,
	remarks: '0.3 m in the back garden',
	...values
});

describe('a partner’s report', () => {
	it('is kept once however often it is sent, without a telescope of the network', async () => {
		const input = limit();
		await Promise.all([1, 2, 3].map(() => reportAsPartner(world.app, partner, input)));
		const rows = await world.app.database.select().from(report);
		expect(rows).toHaveLength(1);
		expect(rows[0]).toMatchObject({ telescopeId: null, slotId: null, reportedBy: partner.id });
		const entries = await world.app.database
			.select()
			.from(journal)
			.where(eq(journal.kind, 'reported'));
		expect(entries).toHaveLength(1);
		expect(entries[0]!.detail).toMatchObject({ partner: true, kind: 'limit' });
		expect(await listOwnReports(world.app, partner)).toMatchObject([
			{ designation: 'D26L01-a', limitMag: 20.5 }
		]);
		expect(await listOwnReports(world.app, other)).toEqual([]);
		await expect(reportAsPartner(world.app, other, input)).rejects.toMatchObject({
			code: 'wrongState'
		});
	});

	it('is possible on what has been shared only, which is all that partners can name', async () => {
		const choices = await reportableTransients(world.app, partner);
		expect(choices.map(({ designation }) => designation)).toEqual(['D26L01-a']);
		const hidden = () => reportAsPartner(world.app, partner, limit({ designation: 'D26L01-b' }));
		const absent = () => reportAsPartner(world.app, partner, limit({ designation: 'D26L01-z' }));
		await expect(hidden()).rejects.toMatchObject({ code: 'notFound' });
		await expect(absent()).rejects.toMatchObject({ code: 'notFound' });
	});

	it('may not lie in the future, nor come from another role', async () => {
		const future = new Date(NOW.getTime() + 3_600_000).toISOString();
		await expect(
			reportAsPartner(world.app, partner, limit({ observedAt: future }))
		).rejects.toMatchObject({ code: 'invalid' });
		for (const actor of [duty, null]) {
			await expect(reportAsPartner(world.app, actor, limit())).rejects.toMatchObject({
				code: actor ? 'notAllowed' : 'notSignedIn'
			});
		}
	});

	it('is read from a form whose time means UTC and whose hidden boxes don’t count', () => {
		const form = {
			reportId: randomUUID(),
			designation: 'D26L01-a',
			filter: 'r',
			observedAt: '2026-12-01T04:00',
			exposureS: '',
			magnitude: '19.4',
			magnitudeError: '0.1',
			limitMag: '20.5',
			remarks: ''
		};
		expect(partnerReportFormSchema.parse({ ...form, kind: 'limit' })).toMatchObject({
			observedAt: '2026-12-01T04:00:00Z',
			limitMag: 20.5
		});
		expect(partnerReportFormSchema.parse({ ...form, kind: 'detection' })).toMatchObject({
			magnitude: 19.4,
			exposureS: undefined
		});
		const wrong = partnerReportFormSchema.safeParse({ ...form, kind: 'detection', magnitude: '' });
		expect(wrong.error?.issues.map(({ path }) => path)).toEqual([['magnitude']]);
	});
});

describe('preferences', () => {
	it('start silent and are kept as chosen', async () => {
		expect((await preferencesView(world.app, partner)).preferences).toEqual({
			byEmail: false,
			byPush: false,
			streamCodes: [],
			telescopeCode: null
		});
		const chosen = preferencesFormSchema.parse({
			byEmail: 'on',
			streamCodes: ['tambour', 'tambour'],
			telescopeCode: 'ALM'
		});
		await savePreferences(world.app, partner, chosen);
		await savePreferences(world.app, partner, chosen);
		const view = await preferencesView(world.app, partner);
		expect(view.preferences).toEqual({
			byEmail: true,
			byPush: false,
			streamCodes: ['tambour'],
			telescopeCode: 'ALM'
		});
		expect(view.pushKey).toBeNull();
		expect((await preferencesView(world.app, other)).preferences.byEmail).toBe(false);
	});

	it('name each field that is not known here', async () => {
		await expect(
			savePreferences(world.app, partner, {
				byEmail: true,
				byPush: false,
				streamCodes: ['nowhere'],
				telescopeCode: 'XXX'
			})
		).rejects.toMatchObject({
			errors: [{ pointer: '/streamCodes' }, { pointer: '/telescopeCode' }]
		});
	});
});
