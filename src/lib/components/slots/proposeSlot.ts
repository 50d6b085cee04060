import type { BoardOutlookRow, BoardSlot } from '../../domain/board';

const LEAST_MINUTES = 10;
const MINUTE_MS = 60_000;

/** Length of a plan from its first exposure to the end of its last, milliseconds; 10 minutes at least. */
export function planLengthMs({ tiles }: BoardOutlookRow): number {
	const starts = tiles.map(({ startAt }) => Date.parse(startAt));
	const ends = tiles.map(({ startAt, exposureS }) => Date.parse(startAt) + exposureS * 1000);
	const length = tiles.length > 0 ? Math.max(...ends) - Math.min(...starts) : 0;
	return Math.max(length, LEAST_MINUTES * MINUTE_MS);
}

/**
 * The first time that a telescope can give: from now or its opening on, inside a window, clear of the
 * slots that hold it, as long as its plan where the window allows. On whole minutes, the end rounded up.
 * Null when no gap of 10 minutes is left.
 */
export function proposeSlot(
	row: BoardOutlookRow,
	held: readonly Pick<BoardSlot, 'startAt' | 'endAt'>[],
	nowMs: number
): { startMs: number; endMs: number } | null {
	const wantedMs = planLengthMs(row);
	const taken = held
		.map(({ startAt, endAt }) => ({ startMs: Date.parse(startAt), endMs: Date.parse(endAt) }))
		.sort((a, b) => a.startMs - b.startMs);
	for (const window of row.windows) {
		const closesMs = Math.floor(Date.parse(window.endAt) / MINUTE_MS) * MINUTE_MS;
		let startMs = ceilMinute(Math.max(nowMs, Date.parse(window.startAt)));
		for (const slot of [...taken, { startMs: Infinity, endMs: Infinity }]) {
			if (slot.endMs <= startMs) continue;
			const limitMs = Math.min(closesMs, slot.startMs);
			if (limitMs - startMs >= LEAST_MINUTES * MINUTE_MS) {
				return { startMs, endMs: Math.min(limitMs, ceilMinute(startMs + wantedMs)) };
			}
			startMs = Math.max(startMs, ceilMinute(slot.endMs));
		}
	}
	return null;
}

function ceilMinute(utcMs: number): number {
	return Math.ceil(utcMs / MINUTE_MS) * MINUTE_MS;
}
