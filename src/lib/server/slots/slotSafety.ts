import type { LimitName } from '../../sky/visibility/telescope';
import type { OutlookRow } from '../../sky/outlook/outlook';
import { SAFETY_NOTE } from '../../domain/vocabulary';
import { DomainError } from '../domainError';
import { whyNot, LIMIT_PHRASES } from '../outlook/limitWords';

/** The form rounds to minutes: a claim may overhang its window by this much. */
const EDGE_GRACE_MS = 60_000;

/**
 * Throws `unsafePointing`, saying which limit forbids it, unless the whole range lies inside one window.
 */
export function requireUsable(
	row: OutlookRow | undefined,
	range: { start: Date; end: Date },
	telescopeName: string
): asserts row is OutlookRow {
	if (!row) throw new DomainError('notFound', `${telescopeName} is not in service.`);
	const startMs = range.start.getTime();
	const endMs = range.end.getTime();
	const around = row.windows.find(
		(window) => window.startMs - EDGE_GRACE_MS <= startMs && window.endMs + EDGE_GRACE_MS >= endMs
	);
	if (around) return;
	const touching = row.windows.find((window) => window.endMs > startMs && window.startMs < endMs);
	const next = row.windows.find((window) => window.startMs >= startMs);
	let reason: string;
	let limit: LimitName;
	if (touching && touching.startMs - EDGE_GRACE_MS > startMs) {
		limit = touching.opensBy;
		reason = `${telescopeName} can point there only from ${clock(touching.startMs)} UTC (${LIMIT_PHRASES[limit]})`;
	} else if (touching) {
		limit = touching.endsBy;
		reason = `${telescopeName} can point there only until ${clock(touching.endMs)} UTC (${LIMIT_PHRASES[limit]})`;
	} else if (next) {
		limit = next.opensBy;
		reason = `${telescopeName} can’t point there before ${clock(next.startMs)} UTC (${LIMIT_PHRASES[limit]})`;
	} else {
		limit = row.forbidden?.limit ?? 'end';
		reason = `${telescopeName} can’t point there in the next 24 hours: ${row.forbidden ? whyNot(row.forbidden) : 'no window'}`;
	}
	throw new DomainError('unsafePointing', `${reason}. ${SAFETY_NOTE}`, [], { limit });
}

function clock(ms: number): string {
	return new Date(ms).toISOString().slice(11, 16);
}
