import { describe, expect, it } from 'vitest';
import { readReferenceJson } from '../../../../../tests/unit/readReference';
import type { LimitName } from '../telescope';
import { visibilityBetween } from '../visibilityOf';
import { awkwardCases } from './awkwardCases';
import { boundaryCases } from './boundaryCases';
import { endMsOf, limitsOf, startMsOf, type Case } from './observingCase';

/** An edge and the seconds around it up to which astropy has the limit that sets it within 2″ of 0. */
type Edge = { limit: LimitName; within2Arcsec: [number, number] };
type Best = {
	spanDeg: number | null;
	kept: boolean;
	withOthersDeg: number | null;
	othersKept: boolean;
};
type Row = {
	case: unknown;
	seconds: number;
	windows: { firstS: number; lastS: number; opens: Edge; ends: Edge }[];
	best: Partial<Record<LimitName, Best>>;
};

const cases = [...awkwardCases, ...boundaryCases];
const rows = readReferenceJson<{ cases: Row[] }>('windows1s.json').cases;

const answerFor = (one: Case) =>
	visibilityBetween(
		{ site: one.site, limits: limitsOf(one), closures: one.closures ?? [] },
		one.position,
		startMsOf(one),
		endMsOf(one)
	);

/** Greatest distance of an edge from the second in which astropy has it: 2.5 s, or 2″ where that is longer; the Moon's 30 s. */
function allowedS(edge: Edge, edgeS: number, one: Case): { fromS: number; toS: number } {
	const toleranceS = edge.limit === 'moon' ? 30 : 2.5;
	const [earliestS, latestS] = edge.within2Arcsec;
	// Closures are instants that were given, so that there is nothing to compute.
	if (edge.limit === 'closure') return { fromS: edgeS - 1, toS: edgeS + 1 };
	const near = { fromS: edgeS - toleranceS, toS: edgeS + toleranceS };
	if (edge.limit === 'moon') return near;
	// Past 60° and where a limit is barely reached or a body creeps towards it, seconds measure nothing: 2″ do.
	const creeping = latestS - earliestS > 6;
	if (Math.abs(one.site.latDeg) < 60 && !creeping) return near;
	return { fromS: Math.min(near.fromS, earliestS), toS: Math.max(near.toS, latestS) };
}

describe('windows against astropy 5.2.1 at every second', () => {
	it('asks both the same', () => {
		expect(rows.length).toBeGreaterThanOrEqual(47);
		expect(rows.map((row) => row.case)).toEqual(
			cases.map((one) => ({
				name: one.name,
				site: one.site,
				position: one.position,
				startMs: startMsOf(one),
				endMs: endMsOf(one),
				limits: limitsOf(one),
				closures: one.closures ?? []
			}))
		);
	});

	it.each(cases.map((one, i) => [one.name, one, rows[i]!] as const))('%s', (_, one, row) => {
		const answer = answerFor(one);
		const startMs = startMsOf(one);
		expect(answer.windows).toHaveLength(row.windows.length);
		answer.windows.forEach((window, i) => {
			const { firstS, lastS, opens, ends } = row.windows[i]!;
			expect([window.opensBy, window.endsBy]).toEqual([opens.limit, ends.limit]);
			for (const [utcMs, insideS, outsideS, edge] of [
				[window.startMs, firstS, firstS - 1, opens],
				[window.endMs, lastS, lastS + 1, ends]
			] as const) {
				const edgeS = (utcMs - startMs) / 1000;
				if (edge.limit === 'start' || edge.limit === 'end') {
					expect(edgeS).toBe(insideS);
					continue;
				}
				// The edge itself lies between two seconds, half a second from their middle at most.
				const { fromS, toS } = allowedS(edge, (insideS + outsideS) / 2, one);
				expect(edgeS).toBeGreaterThan(fromS - 0.5);
				expect(edgeS).toBeLessThan(toS + 0.5);
			}
		});
	});

	it('is always up, never up and up in pieces', () => {
		const verdicts = cases.map((one) => answerFor(one).verdict);
		expect(new Set(verdicts)).toEqual(new Set(['alwaysUp', 'neverUp', 'windows']));
	});

	it('has an edge set by every limit but the declination, which sets none', () => {
		const limits = rows.flatMap(({ windows }) =>
			windows.flatMap(({ opens, ends }) => [opens.limit, ends.limit])
		);
		expect([...new Set(limits)].sort()).toEqual(
			[
				...['altitude', 'closure', 'end', 'horizon', 'hourAngle', 'moon', 'start', 'sun'],
				...['sunDistance', 'zenith']
			].sort()
		);
	});

	const never = cases.flatMap((one, i) =>
		rows[i]!.windows.length === 0 ? [[one.name, one, rows[i]!.best] as const] : []
	);

	it.each(never)('names what forbids, and by how much: %s', (_, one, best) => {
		const answer = answerFor(one);
		if (answer.verdict !== 'neverUp') throw new Error(`expected neverUp, got ${answer.verdict}`);
		const { limit, closestDeg } = answer.forbidden;
		const named = best[limit]!;
		const broken = Object.values(best).filter(({ kept }) => !kept);
		if (broken.length > 0) {
			expect(named.kept).toBe(false);
			if (named.spanDeg === null) expect(closestDeg).toBeNull();
			else expect(Math.abs(closestDeg! + named.spanDeg)).toBeLessThan(0.002);
			return;
		}
		// Each is kept at some time, never all: the one that comes closest while all others are kept.
		const missing = Object.values(best).flatMap(({ othersKept, withOthersDeg }) =>
			othersKept && withOthersDeg !== null ? [-withOthersDeg] : []
		);
		expect(Math.abs(-named.withOthersDeg! - Math.min(...missing))).toBeLessThan(0.2);
		expect(Math.abs(closestDeg! - Math.min(...missing))).toBeLessThan(0.2);
	});
});
