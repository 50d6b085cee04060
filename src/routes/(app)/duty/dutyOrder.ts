import type { BoardTransient, Viewer } from '$lib/domain/board';

/** Whether the transient still waits for this person: untaken, or taken by them and undecided. */
export function waitsFor(
	{ taken, decision, isTest }: BoardTransient,
	viewer: Pick<Viewer, 'id'>
): boolean {
	if (isTest) return false;
	return !taken || (taken.by.id === viewer.id && !decision);
}

/**
 * The order on a phone: untaken first, then taken by this person and undecided, then the rest; inside
 * each the board's own order, costliest wait first. Tests come last.
 */
export function dutyOrder(
	transients: readonly BoardTransient[],
	viewer: Pick<Viewer, 'id'>
): BoardTransient[] {
	const rank = (transient: BoardTransient) => {
		if (transient.isTest) return 3;
		if (!transient.taken) return 0;
		return waitsFor(transient, viewer) ? 1 : 2;
	};
	return [...transients].sort((a, b) => rank(a) - rank(b));
}
