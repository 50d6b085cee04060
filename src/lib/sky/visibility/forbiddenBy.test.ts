import { describe, expect, it } from 'vitest';
import {
	at,
	endMsOf,
	limitsOf,
	site,
	startMsOf,
	summer,
	winter,
	type Case
} from './checks/observingCase';
import { visibilityBetween } from './visibilityOf';

describe('why a telescope can not observe', () => {
	const forbidden = (one: Omit<Case, 'name'>) => {
		const asked = { name: 'forbidden', ...one };
		const answer = visibilityBetween(
			{ site: one.site, limits: limitsOf(asked), closures: one.closures ?? [] },
			one.position,
			startMsOf(asked),
			endMsOf(asked)
		);
		if (answer.verdict !== 'neverUp') throw new Error(`expected neverUp, got ${answer.verdict}`);
		return answer.forbidden;
	};

	it('names the altitude and how far it falls short', () => {
		const answer = forbidden({ site: site(-30, -70), start: winter, position: at(75, 50) });
		expect(answer.limit).toBe('altitude');
		expect(answer.closestDeg).toBeCloseTo(10, 1);
	});

	it('names the Sun in polar day', () => {
		expect(forbidden({ site: site(78, 15), start: summer, position: at(250, 60) })).toMatchObject({
			limit: 'sun'
		});
	});

	it('names the declination with what is missing', () => {
		const answer = forbidden({
			site: site(20, -100),
			start: winter,
			position: at(60, 70),
			limits: { decMaxDeg: 60 }
		});
		expect(answer).toMatchObject({ limit: 'declination', closestDeg: 10 });
	});

	it('names a closure over the whole span', () => {
		expect(
			forbidden({
				site: site(-30, -70),
				start: winter,
				position: at(75, -30),
				closures: [{ startMs: 0, endMs: 4e12, reason: 'mirror' }]
			})
		).toMatchObject({ limit: 'closure', closestDeg: null });
	});

	it('names the limit that comes closest when each holds at some time', () => {
		// Up only in daylight.
		const answer = forbidden({
			site: site(30, 10),
			start: winter,
			position: at(200, -12),
			limits: { minAltDeg: 45, sunAltMaxDeg: -18, sunDistanceDeg: 20 }
		});
		expect(['altitude', 'sun']).toContain(answer.limit);
		expect(answer.closestDeg).toBeGreaterThan(0);
	});
});
