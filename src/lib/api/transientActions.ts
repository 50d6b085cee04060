import type { Decision } from '../domain/vocabulary';
import { postJson } from './request';

const path = (designation: string) => `/api/v1/transients/${encodeURIComponent(designation)}`;

/** Acknowledges a transient and owns its decision. */
export function takeTransient(designation: string): Promise<unknown> {
	return postJson(`${path(designation)}/take`, {});
}

/** Decides; a changed decision needs a reason. */
export function decideTransient(
	designation: string,
	decision: Decision,
	reason = ''
): Promise<unknown> {
	return postJson(`${path(designation)}/decision`, { decision, reason });
}
