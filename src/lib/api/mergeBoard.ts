import type { Board } from '../domain/board';

/**
 * Puts an answer to `since` into the board held so far. `openDesignations` of the answer decides what
 * stays and in which order. Null when a piece is missing, so that the whole board must be asked for.
 */
export function mergeBoard(held: Board, answer: Board): Board | null {
	if (answer.revision < held.revision) return null;
	const known = new Map(held.transients.map((transient) => [transient.designation, transient]));
	for (const changed of answer.transients) known.set(changed.designation, changed);
	const transients = [];
	for (const designation of answer.openDesignations) {
		const transient = known.get(designation);
		if (!transient) return null;
		transients.push(transient);
	}
	return { ...answer, transients };
}
