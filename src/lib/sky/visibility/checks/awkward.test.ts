import { describe, expect, it } from 'vitest';
import { at, cases, plain, site, summer, winter, type Case } from './awkwardCases';
import { libraryMargins } from './libraryMargins';
import { visibilityBetween } from '../visibilityOf';

const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;
const ARCSEC = 1 / 3600;

const worst = (one: Case, utcMs: number) =>
	libraryMargins(one, utcMs).reduce((a, b) => (b.margin < a.margin ? b : a));

describe('windows against sampling with the library’s own star, Sun and Moon', () => {
	it.each(cases.map((one) => [one.name, one] as const))('%s', (_, one) => {
		const startMs = Date.parse(one.start);
		const endMs = startMs + DAY_MS;
		const answer = visibilityBetween(
			{ site: one.site, limits: { ...plain, ...one.limits }, closures: one.closures ?? [] },
			one.position,
			startMs,
			endMs
		);
		// Any missing or extra window of a minute or more holds one of these instants; edges are checked to a second below.
		for (let utcMs = startMs; utcMs <= endMs; utcMs += MINUTE_MS) {
			const inside = answer.windows.some((w) => utcMs >= w.startMs && utcMs <= w.endMs);
			const { margin } = worst(one, utcMs);
			if (Math.abs(margin) > 15 * ARCSEC) expect([utcMs, inside]).toEqual([utcMs, margin > 0]);
		}
		for (const window of answer.windows) {
			for (const [edgeMs, limit, outward] of [
				[window.startMs, window.opensBy, -1],
				[window.endMs, window.endsBy, 1]
			] as const) {
				if (limit === 'start' || limit === 'end') continue;
				// A second to either side of an edge the limit that is named holds, and is broken.
				const margin = (utcMs: number) =>
					libraryMargins(one, utcMs).find((entry) => entry.limit === limit)!.margin;
				expect(margin(edgeMs - outward * 1000)).toBeGreaterThan(-2 * ARCSEC);
				expect(margin(edgeMs + outward * 1000)).toBeLessThan(2 * ARCSEC);
			}
		}
		if (answer.verdict === 'neverUp') {
			const { limit, closestDeg } = answer.forbidden;
			const best = Math.max(
				...Array.from(
					{ length: 145 },
					(_, i) =>
						libraryMargins(one, startMs + i * 10 * MINUTE_MS).find(
							(entry) => entry.limit === limit
						)!.margin
				)
			);
			// The limit named really is broken, and comes no closer than it says where it never holds.
			if (closestDeg !== null && best <= 0) expect(closestDeg).toBeLessThanOrEqual(-best + 0.01);
			if (best <= 0 && closestDeg !== null) expect(closestDeg).toBeGreaterThan(-best - 0.5);
		}
	});

	it('has cases that are always up, never up and up in pieces', () => {
		const verdicts = cases.map(
			(one) =>
				visibilityBetween(
					{ site: one.site, limits: { ...plain, ...one.limits }, closures: one.closures ?? [] },
					one.position,
					Date.parse(one.start),
					Date.parse(one.start) + DAY_MS
				).verdict
		);
		expect(new Set(verdicts)).toEqual(new Set(['alwaysUp', 'neverUp', 'windows']));
	});
});

describe('why a telescope can not observe', () => {
	const forbidden = (one: Omit<Case, 'name'>) => {
		const answer = visibilityBetween(
			{ site: one.site, limits: { ...plain, ...one.limits }, closures: one.closures ?? [] },
			one.position,
			Date.parse(one.start),
			Date.parse(one.start) + DAY_MS
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
