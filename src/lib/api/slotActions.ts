import type { BoardSlot } from '../domain/board';
import type { Claim, ReportInput } from '../domain/slot';
import { postJson } from './request';

/** Claims a telescope for a transient; refused with `heldBy` when somebody was faster. */
export function claimSlot(claim: Claim): Promise<{ slot: BoardSlot }> {
	return postJson('/api/v1/slots', claim);
}

const path = (id: string) => `/api/v1/slots/${encodeURIComponent(id)}`;

export function releaseSlot(id: string): Promise<unknown> {
	return postJson(`${path(id)}/release`, {});
}

/** Says that the telescope is on the target. */
export function markOnSky(id: string): Promise<unknown> {
	return postJson(`${path(id)}/on-sky`, {});
}

export function reportSlot(
	id: string,
	report: Omit<ReportInput, 'remarks'> & { remarks?: string }
): Promise<unknown> {
	return postJson(`${path(id)}/report`, report);
}

/** Takes a report back; its maker or a steward may. */
export function withdrawReport(id: string, reason: string): Promise<unknown> {
	return postJson(`/api/v1/reports/${encodeURIComponent(id)}/withdraw`, { reason });
}
