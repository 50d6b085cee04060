import { describe, expect, it } from 'vitest';
import { streamEditSchema } from './stream';

const stream = {
	name: 'Tambour',
	streamClass: 'gamma',
	defaultContainment: '0.9',
	defaultSystematicDeg: '0',
	alertsPerYear: '100',
	coincidenceWindowS: '3600',
	silentAfterMinutes: '1440',
	fadeM1Mean: '22.2',
	fadeM1Spread: '2.3',
	fadeAlpha: '1'
};
const edit = (paramMap: unknown) => streamEditSchema.safeParse({ ...stream, paramMap });

describe('a stream’s map of Params, as a form sends it', () => {
	it('keeps rows with a name; an empty factor is 1', () => {
		const { data } = edit({
			significance: { group: '', name: ' rate_snr ', factor: '' },
			falseAlarmPerYear: { group: 'Trigger', name: 'far', factor: '3.15576e7' },
			systematicDeg: { group: '', name: '', factor: '1' }
		});
		expect(data?.paramMap).toEqual({
			significance: { group: '', name: 'rate_snr', factor: 1 },
			falseAlarmPerYear: { group: 'Trigger', name: 'far', factor: 31_557_600 }
		});
	});

	it.each([
		[{ significance: { group: 'G', name: '', factor: '1' } }, 'paramMap.significance.name'],
		[{ significance: { group: '', name: 'a', factor: 'x' } }, 'paramMap.significance.factor'],
		[{ systematicDeg: { group: '', name: 'a', factor: '0' } }, 'paramMap.systematicDeg.factor'],
		[{ systematicDeg: { group: '', name: 'a'.repeat(101) } }, 'paramMap.systematicDeg.name']
	])('names the field that is wrong: %#', (paramMap, path) => {
		expect(edit(paramMap).error?.issues.map((issue) => issue.path.join('.'))).toEqual([path]);
	});

	it('is left alone when a form has none', () => {
		expect(streamEditSchema.parse(stream).paramMap).toBeUndefined();
	});
});
