import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import { streamEditSchema, type StreamEdit } from '$lib/domain/stream';
import { formObject } from '$lib/server/http/formObject';
import StreamFields from './StreamFields.svelte';

const settings: StreamEdit = {
	name: 'Tambour',
	streamClass: 'gamma',
	defaultContainment: 0.9,
	defaultSystematicDeg: 0.5,
	alertsPerYear: 200,
	coincidenceWindowS: 3600,
	silentAfterMinutes: 1440,
	fadeM1Mean: 22.2,
	fadeM1Spread: 2.3,
	fadeAlpha: 1,
	paramMap: {
		significance: { group: '', name: 'rate "snr"', factor: 1 },
		falseAlarmPerYear: { group: 'Trigger', name: 'far', factor: 31_557_600 }
	}
};

const unescape = (text: string) =>
	text.replaceAll('&quot;', '"').replaceAll('&lt;', '<').replaceAll('&amp;', '&');

/** The form's boxes as a browser would send them. */
function sentBy(html: string): FormData {
	const form = new FormData();
	for (const [tag] of html.matchAll(/<input[^>]*>/g)) {
		const name = /\sname="([^"]*)"/.exec(tag)?.[1];
		if (name) form.append(name, unescape(/\svalue="([^"]*)"/.exec(tag)?.[1] ?? ''));
	}
	form.append('streamClass', 'gamma');
	return form;
}

describe('the form of a stream’s settings', () => {
	it('sends back what it shows', () => {
		const { body } = render(StreamFields, { props: { values: settings, errors: [] } });
		expect(streamEditSchema.parse(formObject(sentBy(body)))).toEqual(settings);
	});

	it('says in plain words what is mapped, and shows a refusal at its box', () => {
		const errors = [
			{ pointer: '/paramMap/systematicDeg/name', detail: 'The name of the Param is needed.' }
		];
		const values = { paramMap: { systematicDeg: { group: 'Position', name: '', factor: '1' } } };
		const { body } = render(StreamFields, { props: { values, errors } });
		for (const words of ['Significance', 'False alarms a year', 'Systematic error, deg']) {
			expect(body).toContain(`${words}</legend>`);
		}
		const box = /<input[^>]*name="paramMap\/systematicDeg\/name"[^>]*>/.exec(body)?.[0];
		expect(box).toContain('aria-invalid="true"');
		expect(body).toContain('value="Position"');
	});
});
