import type { z } from 'zod';

/** What a schema finds wrong, in plain words; where it has words of its own, those stand. */
export const plainIssue: z.core.$ZodErrorMap = (issue) => {
	switch (issue.code) {
		case 'invalid_type':
			return issue.input === undefined ? 'is needed' : `must be ${nounOf(issue.expected)}`;
		case 'invalid_value':
			return `must be ${issue.values.length === 1 ? '' : 'one of '}${issue.values.join(', ')}`;
		case 'too_small': {
			const least = issue.inclusive ? 'at least' : 'more than';
			return `must ${measured(issue.origin, least, issue.minimum)}`;
		}
		case 'too_big': {
			const most = issue.inclusive ? 'at most' : 'less than';
			return `must ${measured(issue.origin, most, issue.maximum)}`;
		}
		default:
			return undefined;
	}
};

function measured(origin: string, bound: string, value: number | bigint): string {
	const figure = String(value).replace('-', '−');
	if (origin === 'string') return `have ${bound} ${figure} characters`;
	if (origin === 'array' || origin === 'set') return `have ${bound} ${figure} entries`;
	return `be ${bound} ${figure}`;
}

function nounOf(expected: string): string {
	if (expected === 'int') return 'a whole number';
	return /^[aeiou]/.test(expected) ? `an ${expected}` : `a ${expected}`;
}
