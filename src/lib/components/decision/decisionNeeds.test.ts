import { describe, expect, it } from 'vitest';
import { reasonNeeded } from './decisionNeeds';

const ada = { id: '1', name: 'Ada Lund', initials: 'AL' };
const bo = { id: '2', name: 'Bo Reyes', initials: 'BR' };
const at = '2026-12-01T03:46:17Z';

describe('reasonNeeded', () => {
	it('is not needed for the first decision of the one who took it', () => {
		expect(reasonNeeded({ taken: { by: ada, at }, decision: null }, 'chase', ada)).toBeNull();
	});
	it('is needed to decide what another took', () => {
		expect(reasonNeeded({ taken: { by: bo, at }, decision: null }, 'chase', ada)).toContain(
			'Bo Reyes'
		);
	});
	it('is needed to change a decision, also one of one’s own', () => {
		const decision = { decision: 'chase' as const, by: ada, at, reason: '' };
		expect(reasonNeeded({ taken: { by: ada, at }, decision }, 'drop', ada)).toContain(
			'You decided'
		);
	});
	it('is not needed to say the same again', () => {
		const decision = { decision: 'chase' as const, by: bo, at, reason: '' };
		expect(reasonNeeded({ taken: { by: bo, at }, decision }, 'chase', ada)).toBeNull();
	});
});
