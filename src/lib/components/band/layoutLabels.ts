/** A label wanted at `x`, the middle, with its width; pixels. */
export type WantedLabel = { id: string; x: number; width: number };
export type PlacedLabel = { id: string; x: number; row: number };

/**
 * Places labels in staggered rows so that none overlap and all lie inside 0 to `width`, each as near
 * as it can be to its wanted middle; row 0 is nearest to the ticks. A label for which no row has
 * room is left out. The order of the input does not matter.
 */
export function layoutLabels(
	wanted: readonly WantedLabel[],
	width: number,
	rows: number,
	gap = 3
): PlacedLabel[] {
	const sorted = [...wanted].sort((a, b) => a.x - b.x || a.id.localeCompare(b.id));
	const members: WantedLabel[][] = Array.from({ length: rows }, () => []);
	for (const label of sorted) {
		let best: { row: number; shift: number } | null = null;
		for (const [row, held] of members.entries()) {
			const tried = spread([...held, label], width, gap);
			if (!tried) continue;
			const before = shiftOf(held, spread(held, width, gap) ?? []);
			// A higher row costs a little, so that labels stay near their ticks.
			const shift = shiftOf([...held, label], tried) - before + row * 2;
			if (!best || shift < best.shift - 1e-9) best = { row, shift };
		}
		if (best) members[best.row]!.push(label);
	}
	return members.flatMap((held, row) =>
		(spread(held, width, gap) ?? []).map((x, i) => ({ id: held[i]!.id, x, row }))
	);
}

function shiftOf(labels: readonly WantedLabel[], middles: readonly number[]): number {
	return labels.reduce((sum, { x }, i) => sum + Math.abs((middles[i] ?? x) - x), 0);
}

/** Middles of one row's labels, in order: clusters share their shift evenly (pool adjacent violators). */
function spread(labels: readonly WantedLabel[], width: number, gap: number): number[] | null {
	const needed = labels.reduce((sum, label) => sum + label.width + gap, -gap);
	if (labels.length > 0 && needed > width) return null;
	type Cluster = { members: WantedLabel[]; start: number; length: number };
	const clusters: Cluster[] = [];
	for (const label of labels) {
		let cluster: Cluster = settle([label]);
		let last = clusters.at(-1);
		while (last && last.start + last.length + gap > cluster.start) {
			cluster = settle([...last.members, ...cluster.members]);
			clusters.pop();
			last = clusters.at(-1);
		}
		clusters.push(cluster);
	}
	return clusters.flatMap(({ members, start }) => {
		let left = start;
		return members.map((label) => {
			const middle = left + label.width / 2;
			left += label.width + gap;
			return middle;
		});
	});

	function settle(members: WantedLabel[]): Cluster {
		const length = members.reduce((sum, label) => sum + label.width + gap, -gap);
		let left = 0;
		let wantedStart = 0;
		for (const label of members) {
			wantedStart += label.x - label.width / 2 - left;
			left += label.width + gap;
		}
		const start = Math.max(0, Math.min(width - length, wantedStart / members.length));
		return { members, start, length };
	}
}
