import type { BoardTransient, Viewer } from '../../domain/board';
import type { Decision } from '../../domain/vocabulary';

/** Why a decision needs a reason from this person; null when it does not. */
export function reasonNeeded(
	{ taken, decision }: Pick<BoardTransient, 'taken' | 'decision'>,
	wanted: Decision,
	viewer: Pick<Viewer, 'id'>
): string | null {
	if (decision && decision.decision !== wanted) {
		const who = decision.by.id === viewer.id ? 'You' : decision.by.name;
		return `${who} decided to ${decision.decision}. Say why that changes.`;
	}
	if (!decision && taken && taken.by.id !== viewer.id) {
		return `${taken.by.name} took this. Say why you decide instead.`;
	}
	return null;
}
