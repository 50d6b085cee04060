import { expect, it } from 'vitest';
import { executionStatus } from './executionStatus';

it.each([
	['offered', false, [], 'Planned'],
	['claimed', false, [], 'Scheduled'],
	['on sky', true, [], 'Scheduled'],
	['reported', true, ['detection'], 'Performed'],
	['reported', false, ['weather', 'limit'], 'Performed'],
	['reported', true, ['weather'], 'Aborted'],
	['reported', true, [], 'Aborted'],
	['released', false, [], 'Unscheduled'],
	['released', true, [], 'Aborted'],
	['lapsed', false, [], 'Unscheduled']
] as const)('%s, on sky %s, reports %j: %s', (state, wasOnSky, reportKinds, status) => {
	expect(executionStatus(state, { wasOnSky, reportKinds: [...reportKinds] })).toBe(status);
});
