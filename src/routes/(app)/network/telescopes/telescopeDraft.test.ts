import { expect, test } from 'vitest';
import { draftOf, NEW_TELESCOPE, numberIn } from './telescopeDraft';

test('without anything sent the form holds what is stored, with the boxes of both shapes', () => {
	const stored = {
		...NEW_TELESCOPE,
		name: 'Cerro Almendra',
		observerIds: ['someone'],
		detectors: [{ ...NEW_TELESCOPE.detectors[0]!, shape: 'circle' as const, radiusDeg: 0.5 }]
	};
	const draft = draftOf(stored, undefined);
	expect(draft).toMatchObject({ name: 'Cerro Almendra', observerIds: ['someone'] });
	expect(draft.detectors).toMatchObject([{ shape: 'circle', radiusDeg: 0.5, widthDeg: '' }]);
});

test('what was sent and refused stands in the form again, unticked boxes and cleared rows too', () => {
	const stored = { ...NEW_TELESCOPE, observerIds: ['someone'] };
	stored.limits = { ...stored.limits, horizon: [{ azDeg: 0, altDeg: 20 }] };
	const draft = draftOf(stored, { name: 'X', limits: { minAltDeg: 'low' }, depths: [] });
	expect(draft).toMatchObject({ name: 'X', observerIds: [], depths: [], detectors: [] });
	expect(draft.limits).toMatchObject({ minAltDeg: 'low', sunAltMaxDeg: -12, horizon: null });
});

test('a closure that was refused leaves the telescope as it is stored', () => {
	const sent = { reason: '', startAt: '', endAt: '' };
	expect(draftOf(NEW_TELESCOPE, sent)).toEqual(draftOf(NEW_TELESCOPE, undefined));
});

test('a box holds a number only when all of it is one', () => {
	expect([20, '20.5', '', null, 'x'].map(numberIn)).toEqual([20, 20.5, null, null, null]);
});
