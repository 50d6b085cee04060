import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { separationDeg } from '../../sky/vector';
import { DomainError } from '../domainError';
import type { ParamMap } from '../db/schema/alerts';
import { readVoEvent } from './readVoEvent';

const fixture = (name: string) => readFileSync(`fixtures/packets/${name}.xml`, 'utf8');
const report = fixture('voeventReport');

const paramMap: ParamMap = {
	significance: { group: '', name: 'rate_significance', factor: 1 },
	falseAlarmPerYear: { group: 'Trigger', name: 'false_alarms_per_s', factor: 31_557_600 },
	systematicDeg: { group: 'Position', name: 'systematic', factor: 1 / 60 }
};
const settings = { paramMap, defaultContainment: 0.9, defaultSystematicDeg: 0.25 };
const receivedAt = new Date('2026-12-01T03:58:00Z');

const read = (text: string | Buffer, given = settings) =>
	readVoEvent({ body: Buffer.from(text), receivedAt }, given);
function alertOf(text: string, given = settings) {
	const outcome = read(text, given);
	if (outcome.kind !== 'alert') throw new Error(outcome.reason);
	return outcome;
}
function refusalOf(text: string): DomainError {
	try {
		read(text);
	} catch (error) {
		if (error instanceof DomainError) return error;
		throw error;
	}
	throw new Error('it was read');
}
/** The report with one piece of it replaced; fails when the piece is not in it. */
function changed(from: string, to: string, text = report): string {
	expect(text).toContain(from);
	return text.replace(from, to);
}
const pointersOf = (text: string) => refusalOf(text).errors.map(({ pointer }) => pointer);
const AT = '/VOEvent/WhereWhen/ObsDataLocation/ObservationLocation';

describe('a VOEvent of role observation', () => {
	it('becomes an alert with the stream’s defaults and mapped Params', () => {
		const { content, notes } = alertOf(report);
		expect(content).toMatchObject({
			packetId: 'ivo://tambour.invalid/alerts#TB-26120103',
			serial: 1,
			role: 'observation',
			kind: 'report',
			cites: [],
			t0: '2026-12-01T03:41:27.250Z',
			shape: {
				kind: 'circle',
				centre: { raDeg: 83.4, decDeg: -8.2 },
				radiusDeg: 3,
				containment: 0.9
			},
			significance: 8.1
		});
		const shape = content.shape;
		expect(shape?.kind === 'circle' && shape.systematicDeg).toBe(1.6);
		// 6.3e-9 per second and 31557600 s a year, to six digits.
		expect(content.falseAlarmPerYear).toBe(0.198813);
		expect(notes).toEqual([]);
	});

	it('keeps Why, How and Reference in plain lines', () => {
		expect(alertOf(report).content.remarks.split('\n')).toEqual([
			'First position, computed on board',
			'Why: process.variation.burst;em.gamma; importance 0.8; gamma-ray burst, process.variation.burst;em.gamma (identified, probability 0.93); stat.falsealarm (probability 0.05)',
			'How: Twelve scintillators, all-sky',
			'T0: known to 0.128 s',
			'See: https://tambour.invalid/alerts/26120103; https://tambour.invalid/instrument'
		]);
	});

	it('cuts long remarks between characters', () => {
		const text = changed('Twelve scintillators, all-sky', '😀'.repeat(5000));
		const { remarks } = alertOf(text).content;
		expect(remarks.length).toBeLessThanOrEqual(4000);
		expect(remarks.isWellFormed()).toBe(true);
	});

	it('takes the stream’s own defaults where nothing is mapped', () => {
		const { content } = alertOf(report, { ...settings, paramMap: {}, defaultContainment: 0.5 });
		expect(content.shape).toMatchObject({ containment: 0.5, systematicDeg: 0.25 });
		expect(content.significance).toBeUndefined();
	});

	it('reads the first cell of a mapped table column, and a Value element', () => {
		const table = { significance: { group: 'Rates', name: 'counts', factor: 0.1 } };
		expect(alertOf(report, { ...settings, paramMap: table }).content.significance).toBe(41.25);
		const text = changed(
			'value="8.1" dataType="float" unit="sigma" ucd="stat.snr">',
			'><Value> 7.5 </Value>'
		);
		expect(alertOf(text).content.significance).toBe(7.5);
	});

	it.each(['', 'NaN', 'INF', '1e999', 'eight', '-3', '0x10', '8,1'])(
		'counts a significance of %j as absent',
		(value) => {
			const { content, notes } = alertOf(changed('value="8.1"', `value="${value}"`));
			expect(content.significance).toBeUndefined();
			expect(notes.join()).toContain('Param rate_significance');
		}
	);

	it('never takes role test as real, and role defaults to observation', () => {
		expect(alertOf(fixture('voeventTest')).content.role).toBe('test');
		expect(alertOf(changed(' role="observation"', '')).content.role).toBe('observation');
	});
});

describe('a packet that is no alert', () => {
	it.each([
		['voeventPrediction', 'prediction'],
		['voeventUtility', 'utility']
	])('%s is noted', (name, role) => {
		const outcome = read(fixture(name));
		expect(outcome.kind === 'noted' && outcome.reason).toContain(`role ${role}`);
	});

	it.each([
		[changed('role="observation"', 'role="rehearsal"'), '/VOEvent/@role'],
		[changed('version="2.0"', 'version="1.1"'), '/VOEvent/@version'],
		[report.replaceAll('voe:VOEvent', 'voe:Event'), '/Event'],
		[changed('#TB-26120103"', '#TB 26120103"'), '/VOEvent/@ivorn'],
		[changed('#TB-26120103"', `#${'x'.repeat(200)}"`), '/VOEvent/@ivorn'],
		[changed(' ivorn="ivo://tambour.invalid/alerts#TB-26120103"', ''), '/VOEvent/@ivorn']
	])('is refused by name: %#', (text, pointer) => {
		expect(pointersOf(text)).toEqual([pointer]);
		expect(refusalOf(text).code).toBe('invalid');
	});
});

describe('citations', () => {
	const cite = (relation: string, ivorn: string) =>
		`<EventIVORN cite="${relation}">${ivorn}</EventIVORN>`;
	const citing = (...items: string[]) =>
		changed('</voe:VOEvent>', `<Citations>${items.join('')}</Citations></voe:VOEvent>`);
	const earlier = 'ivo://tambour.invalid/alerts#TB-26120103';

	it.each([
		['voeventFollowup', 'report', 'followup'],
		['voeventSupersedes', 'update', 'supersedes'],
		['voeventRetraction', 'retraction', 'retraction']
	])('%s makes a %s', (name, kind, relation) => {
		expect(alertOf(fixture(name)).content).toMatchObject({
			kind,
			cites: [{ stream: null, packetId: earlier, relation }]
		});
	});

	it('names each packet once, by the strongest relation', () => {
		const { content } = alertOf(
			citing(cite('followup', 'ivo://a/b#1'), cite('supersedes', 'ivo://a/b#1'))
		);
		expect(content.kind).toBe('update');
		expect(content.cites).toEqual([
			{ stream: null, packetId: 'ivo://a/b#1', relation: 'supersedes' }
		]);
	});

	it('takes a citation without a relation as followup, with a note', () => {
		const { content, notes } = alertOf(citing('<EventIVORN>ivo://a/b#1</EventIVORN>'));
		expect(content.cites[0]!.relation).toBe('followup');
		expect(notes.join()).toContain('without a relation');
	});

	it.each([
		[citing(cite('replaces', 'ivo://a/b#1')), '/VOEvent/Citations/EventIVORN/@cite'],
		[citing(cite('followup', 'ivo://a/b #1')), '/VOEvent/Citations/EventIVORN'],
		[citing(cite('followup', '')), '/VOEvent/Citations/EventIVORN'],
		[citing(cite('supersedes', earlier)), '/VOEvent/Citations/EventIVORN'],
		[
			citing(...Array.from({ length: 21 }, (_, n) => cite('followup', `ivo://a/b#${n}`))),
			'/VOEvent/Citations'
		]
	])('are refused by name: %#', (text, pointer) => {
		expect(pointersOf(text)).toEqual([pointer]);
	});

	it('a retraction needs neither position nor time, and what is wrong with them does not stop it', () => {
		const retraction = fixture('voeventRetraction');
		const plain = alertOf(retraction);
		expect(plain.content).toMatchObject({ t0: '2026-12-01T03:41:52.000Z' });
		expect(plain.content.shape).toBeUndefined();
		expect(plain.notes.join()).toContain('its own date was taken');
		const undated = changed('<Date>2026-12-01T03:41:52</Date>', '', retraction);
		expect(alertOf(undated).content.t0).toBe(receivedAt.toISOString());
		const ahead = changed('<Date>2026-', '<Date>2027-', retraction);
		expect(alertOf(ahead).content.t0).toBe(receivedAt.toISOString());
		const placed = citing(cite('retraction', 'ivo://a/b#1'));
		expect(alertOf(placed).content).toMatchObject({
			kind: 'retraction',
			t0: '2026-12-01T03:41:27.250Z'
		});
		expect(alertOf(placed).content.shape).toBeUndefined();
		const odd = placed.replaceAll('UTC-ICRS-GEO', 'UTC-GALACTIC-GEO');
		expect(alertOf(odd).content.kind).toBe('retraction');
	});
});

describe('coordinate systems', () => {
	const inSystem = (id: string) => report.replaceAll('UTC-ICRS-GEO', id);

	it.each([
		['UTC-ICRS-TOPO', '2026-12-01T03:41:27.250Z'],
		['TT-ICRS-TOPO', '2026-12-01T03:40:18.066Z'],
		['TAI-ICRS-GEO', '2026-12-01T03:40:50.250Z'],
		['GPS-FK5-TOPO', '2026-12-01T03:41:09.250Z']
	])('%s gives %s', (id, t0) => {
		expect(alertOf(inSystem(id)).content.t0).toBe(t0);
	});

	it('turns FK5 into ICRS: the position moves by tens of milliarcseconds', () => {
		const { content, notes } = alertOf(inSystem('UTC-FK5-GEO'));
		if (content.shape?.kind !== 'circle') throw new Error('no circle');
		const movedMas = separationDeg(content.shape.centre, { raDeg: 83.4, decDeg: -8.2 }) * 3.6e6;
		// 19.9, 9.1 and 22.9 mas about the axes: ERFA's fk5hip, see sky/frames.
		expect(movedMas).toBeGreaterThan(10);
		expect(movedMas).toBeLessThan(35);
		expect(notes).toContain('position turned from FK5 (J2000) into ICRS');
	});

	it('brings a barycentric time to the Earth, within 10 ms of astropy (reference/timeframes.json)', () => {
		const { content, notes } = alertOf(fixture('voeventBarycentric'));
		expect(Math.abs(Date.parse(content.t0) - Date.parse('2026-12-01T03:41:27Z'))).toBeLessThan(10);
		expect(notes.join()).toContain('405.5');
		if (content.shape?.kind !== 'circle') throw new Error('no circle');
		expect(content.shape.centre.raDeg).toBeCloseTo(83.4, 12);
		expect(content.shape.radiusDeg).toBeCloseTo(3.5 / 3600, 15);
	});

	it('folds a right ascension and says so', () => {
		const { content, notes } = alertOf(fixture('voeventGps'));
		expect(content.shape).toMatchObject({ centre: { raDeg: 359.5, decDeg: 89.5 }, radiusDeg: 2 });
		expect(content.t0).toBe('2026-12-01T04:00:00.000Z');
		expect(notes).toContain('right ascension -0.5° was folded into 0 to 360°');
	});

	it.each([
		'UTC-FK4-GEO',
		'UTC-GALACTIC-TOPO',
		'TCB-ICRS-BARY',
		'UTC-ICRS-HELIO',
		'UTC-GEOD-TOPO',
		''
	])('%j is refused by name', (id) => {
		const error = refusalOf(inSystem(id));
		expect(error.errors[0]!.pointer).toMatch(/@(coord_system_)?id$/);
		if (id) expect(error.errors[0]!.detail).toContain(id);
	});

	it('refuses two systems that differ', () => {
		const text = changed('coord_system_id="UTC-ICRS-GEO"', 'coord_system_id="TT-ICRS-GEO"');
		expect(pointersOf(text)).toEqual([`${AT}/AstroCoords/@coord_system_id`]);
	});
});

describe('position and time that can’t be used are refused with their place', () => {
	const C1 = `${AT}/AstroCoords/Position2D/Value2/C1`;
	const C2 = `${AT}/AstroCoords/Position2D/Value2/C2`;
	const RADIUS = `${AT}/AstroCoords/Position2D/Error2Radius`;
	const TIME = `${AT}/AstroCoords/Time/TimeInstant/ISOTime`;
	it.each([
		['<C1>83.4<', '<C1>05:33:36<', C1],
		['<C1>83.4<', '<C1>NaN<', C1],
		['<C1>83.4<', '<C1>1e300<', C1],
		['<C2>-8.2<', '<C2>-98.2<', C2],
		['<C2>-8.2<', '<C2/><C9>-8.2<', C2, '</C2>', '</C9>'],
		['<C2>-8.2<', '<C2>1</C2><C2>-8.2<', C2],
		['<Error2Radius>3<', '<Error2Radius>0<', RADIUS],
		['<Error2Radius>3<', '<Error2Radius>-3<', RADIUS],
		['<Error2Radius>3<', '<Error2Radius>unknown<', RADIUS],
		['<Error2Radius>3<', '<Error2Radius>INF<', RADIUS],
		['<Error2Radius>3<', '<Error2Radius>181<', RADIUS],
		['<Error2Radius>3</Error2Radius>', '', RADIUS],
		['unit="deg"', 'unit="hourangle"', `${AT}/AstroCoords/Position2D/@unit`],
		['unit="deg"', 'unit="constructor1"', `${AT}/AstroCoords/Position2D/@unit`],
		['<Name1>RA<', '<Name1>GLON<', `${AT}/AstroCoords/Position2D/Name1`],
		[
			'<Position2D ',
			'<Position3D ',
			`${AT}/AstroCoords/Position3D`,
			'</Position2D>',
			'</Position3D>'
		],
		['2026-12-01T03:41:27.25', '0000-12-01T03:41:27', TIME],
		['2026-12-01T03:41:27.25', '9999-12-31T23:59:59', TIME],
		['2026-12-01T03:41:27.25', '2026-02-30T03:41:27', TIME],
		['2026-12-01T03:41:27.25', '2026-12-01T24:00:00', TIME],
		['2026-12-01T03:41:27.25', '2026-12-31T23:59:60', TIME],
		['2026-12-01T03:41:27.25', '2026-12-01', TIME],
		['2026-12-01T03:41:27.25', 'yesterday', TIME],
		['2026-12-01T03:41:27.25', '', TIME],
		['2026-12-01T03:41:27.25', '1990-01-01T00:30:00+14:00', TIME],
		[
			'</TimeInstant>',
			'<TimeOffset>3</TimeOffset></TimeInstant>',
			TIME.replace('ISOTime', 'TimeOffset')
		],
		[
			'</TimeInstant>',
			'<TimeScale>TT</TimeScale></TimeInstant>',
			TIME.replace('ISOTime', 'TimeScale')
		]
	])('%s → %s', (from, to, pointer, closing = '', closingTo = '') => {
		expect(pointersOf(changed(from, to).replace(closing, closingTo))).toEqual([pointer]);
	});

	it('reads a zone in UTC and refuses it in another scale', () => {
		const zoned = changed('03:41:27.25<', '05:11:27.25+01:30<');
		expect(alertOf(zoned).content.t0).toBe('2026-12-01T03:41:27.250Z');
		expect(pointersOf(zoned.replaceAll('UTC-ICRS', 'TT-ICRS'))).toEqual([TIME]);
	});

	it('takes a leap second that there was', () => {
		const { content, notes } = alertOf(changed('2026-12-01T03:41:27.25', '2016-12-31T23:59:60.5'));
		expect(content.t0).toBe('2017-01-01T00:00:00.500Z');
		expect(notes.join()).toContain('leap second');
	});

	it('takes a position without a unit as degrees, with a note', () => {
		const { notes } = alertOf(changed('<Position2D unit="deg">', '<Position2D>'));
		expect(notes.join()).toContain('taken as degrees');
	});

	it('needs a position and a barycentric time needs one to be brought to the Earth', () => {
		const nowhere = report.replace(/<Position2D[^]*<\/Position2D>/, '');
		expect(pointersOf(nowhere)).toEqual([`${AT}/AstroCoords/Position2D`]);
		const error = refusalOf(nowhere.replaceAll('UTC-ICRS-GEO', 'TDB-ICRS-BARY'));
		expect(error.errors[0]!.detail).toContain('there is no position');
		const timeless = report.replace(/<Time unit[^]*<\/Time>/, '');
		expect(pointersOf(timeless)).toEqual([TIME]);
		expect(pointersOf(report.replace(/<WhereWhen[^]*<\/WhereWhen>/, ''))).toEqual([
			`${AT}/AstroCoords/Position2D`
		]);
	});
});
