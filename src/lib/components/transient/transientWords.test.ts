import { describe, expect, it } from 'vitest';
import { searchedText } from './transientWords';

describe('what looking in vain says', () => {
	it('counts the reports and gives the chance that the source is too faint', () => {
		expect(searchedText({ reports: 1, tooFaintChance: 0.434 })).toBe(
			'1 report of nothing is in it; 43% that the source is too faint for it'
		);
		expect(searchedText({ reports: 3, tooFaintChance: 0.002 })).toBe(
			'3 reports of nothing are in it; <1% that the source is too faint for all of them'
		);
	});
});
