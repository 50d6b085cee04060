import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { openWorld, type World } from '../../../../tests/database/world';
import { closureSchema, telescopeSchema } from '../../domain/telescope';
import type { Actor } from '../actor';
import { parseInput } from '../http/problem';
import { DomainError } from '../domainError';
import { addClosure, removeClosure } from './closureService';
import {
	createTelescope,
	editTelescope,
	listTelescopes,
	retireTelescope,
	telescopeDetail
} from './telescopeService';

let world: World;
let steward: Actor;
let observer: Actor;

beforeAll(async () => {
	world = await openWorld();
	steward = await world.person('steward');
	observer = await world.person('observer');
});
afterAll(() => world.close());

/** As the form sends it: text, empty for "no such limit". */
function typed(overrides: Record<string, unknown> = {}, limits: Record<string, unknown> = {}) {
	return {
		code: 'alm',
		name: 'Cerro Almendra 1.5 m',
		site: 'Cerro Almendra',
		apertureM: '1.5',
		latDeg: '-28.31',
		lonDeg: '-69.92',
		heightM: '2480',
		limits: {
			sunAltMaxDeg: '-12',
			minAltDeg: '20',
			maxAltDeg: '',
			hourAngleMaxH: '',
			decMinDeg: '',
			decMaxDeg: '',
			moonDistanceDeg: '25',
			sunDistanceDeg: '45',
			...limits
		},
		detectors: [{ shape: 'rectangle', widthDeg: '0.75', heightDeg: '0.75', rotationDeg: '0' }],
		depths: [
			{
				filter: 'r',
				refLimitMag: '20.9',
				refExposureS: '60',
				floorMag: '24',
				extinctionMag: '0.1',
				darkSkyMag: '21.1'
			}
		],
		exposureS: '120',
		overheadS: '25',
		maxTiles: '24',
		...overrides
	};
}

function wrongFields(input: unknown): string[] {
	try {
		parseInput(telescopeSchema, input);
		return [];
	} catch (error) {
		return (error as DomainError).errors.map(({ pointer }) => pointer);
	}
}

describe('the form', () => {
	test('turns text into numbers and empty boxes into no limit', () => {
		const parsed = parseInput(telescopeSchema, typed());
		expect(parsed).toMatchObject({
			code: 'ALM',
			latDeg: -28.31,
			limits: { maxAltDeg: null, hourAngleMaxH: null, horizon: null, sunDistanceDeg: 45 }
		});
	});

	test.each([
		['a latitude past the pole', typed({ latDeg: '91' }), '/latDeg'],
		['words for a number', typed({ apertureM: 'big' }), '/apertureM'],
		['an empty number', typed({ exposureS: '' }), '/exposureS'],
		[
			'a zenith limit below the lowest altitude',
			typed({}, { maxAltDeg: '15' }),
			'/limits/maxAltDeg'
		],
		[
			'declination limits the wrong way round',
			typed({}, { decMinDeg: '40', decMaxDeg: '-20' }),
			'/limits/decMaxDeg'
		],
		[
			'an azimuth twice in the mask',
			typed({}, { horizon: ['10', '200', '10'].map((azDeg) => ({ azDeg, altDeg: '20' })) }),
			'/limits/horizon/2/azDeg'
		],
		['no detector', typed({ detectors: [] }), '/detectors'],
		[
			'a filter twice',
			typed({ depths: [typed().depths[0], typed().depths[0]] }),
			'/depths/1/filter'
		],
		['an unconfirmed approach to the Sun', typed({}, { sunDistanceDeg: '30' }), '/sunConfirmed']
	])('%s is refused at its field', (_what, input, pointer) => {
		expect(wrongFields(input)).toEqual([pointer]);
	});

	test('a distance to the Sun below 45° passes once it is confirmed', () => {
		expect(wrongFields(typed({ sunConfirmed: 'on' }, { sunDistanceDeg: '30' }))).toEqual([]);
	});

	test('sorts the horizon mask by azimuth', () => {
		const horizon = ['200', '10'].map((azDeg) => ({ azDeg, altDeg: '20' }));
		const parsed = parseInput(telescopeSchema, typed({}, { horizon }));
		expect(parsed.limits.horizon!.map(({ azDeg }) => azDeg)).toEqual([10, 200]);
	});
});

describe('a telescope', () => {
	const parsed = (overrides: Record<string, unknown> = {}) =>
		parseInput(telescopeSchema, typed({ observerIds: [observer.id], ...overrides }));

	test('is added with its observers, and asks for new outlooks', async () => {
		await createTelescope(world.app, steward, parsed());
		expect(world.waitingJobs()).toContain('outlook.refreshAll');
		const [listed] = await listTelescopes(world.app, observer);
		expect(listed).toMatchObject({
			code: 'ALM',
			fieldDeg2: 0.5625,
			observers: [{ id: observer.id }],
			closedNow: false
		});
	});

	test('can’t take another’s code', async () => {
		await expect(createTelescope(world.app, steward, parsed())).rejects.toMatchObject({
			code: 'nameTaken',
			errors: [{ pointer: '/code' }]
		});
	});

	test('keeps what its form did not change and loses observers taken off', async () => {
		await editTelescope(world.app, steward, 'ALM', parsed({ observerIds: [], maxTiles: '12' }));
		const { settings } = await telescopeDetail(world.app, observer, 'ALM');
		expect(settings).toMatchObject({ maxTiles: 12, observerIds: [], apertureM: 1.5 });
		await editTelescope(world.app, steward, 'ALM', parsed());
	});

	test('takes only observers as observers', async () => {
		await expect(
			editTelescope(world.app, steward, 'ALM', parsed({ observerIds: [steward.id] }))
		).rejects.toMatchObject({ errors: [{ pointer: '/observerIds' }] });
	});

	test('is edited by stewards and PIs only', async () => {
		await expect(editTelescope(world.app, observer, 'ALM', parsed())).rejects.toMatchObject({
			code: 'notAllowed'
		});
	});

	test('is closed by its own observers and stewards, at once and for the time said', async () => {
		const input = parseInput(closureSchema, {
			startAt: world.app.now().toISOString(),
			endAt: new Date(+world.app.now() + 3_600_000).toISOString(),
			reason: 'Wind'
		});
		const { id } = await addClosure(world.app, observer, 'ALM', input);
		const [listed] = await listTelescopes(world.app, observer);
		expect(listed).toMatchObject({ closedNow: true, closure: { reason: 'Wind' } });
		const other = await world.person('observer');
		await expect(removeClosure(world.app, other, 'ALM', id)).rejects.toMatchObject({
			code: 'notAllowed'
		});
		await removeClosure(world.app, steward, 'ALM', id);
		expect((await telescopeDetail(world.app, observer, 'ALM')).closures).toEqual([]);
	});

	test('can’t be closed for a time that is over', async () => {
		const input = parseInput(closureSchema, {
			startAt: new Date(+world.app.now() - 7_200_000).toISOString(),
			endAt: new Date(+world.app.now() - 3_600_000).toISOString(),
			reason: 'Wind'
		});
		await expect(addClosure(world.app, steward, 'ALM', input)).rejects.toMatchObject({
			errors: [{ pointer: '/endAt' }]
		});
	});

	test('is taken out of service and put back', async () => {
		await retireTelescope(world.app, steward, 'ALM', true);
		expect((await listTelescopes(world.app, observer))[0]!.retired).toBe(true);
		await retireTelescope(world.app, steward, 'ALM', false);
	});
});
