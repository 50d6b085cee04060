import { describe, expect, it } from 'vitest';
import {
	alertOf,
	changed,
	fixture,
	pointersOf,
	read,
	receivedAt,
	refusalOf,
	report,
	settings
} from './testing/readingReport';

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
