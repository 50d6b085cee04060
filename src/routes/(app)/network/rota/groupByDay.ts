/** Entries under the UTC day they begin on, both in order of time. */
export function groupByDay<Entry extends { startAt: string }>(
	entries: readonly Entry[]
): { day: string; entries: Entry[] }[] {
	const days = new Map<string, Entry[]>();
	for (const entry of entries) {
		const day = entry.startAt.slice(0, 10);
		days.set(day, [...(days.get(day) ?? []), entry]);
	}
	return [...days].map(([day, grouped]) => ({ day, entries: grouped }));
}
