/**
 * The index that sorts numbers in ascending order, equal ones as they come. Runs that ascend already are merged, so
 * that a map in order of UNIQ, one run for each order, takes a few passes.
 */
export function sortedIndex(keys: Float64Array): Uint32Array {
	const count = keys.length;
	let bounds = runsOf(keys);
	let from = new Uint32Array(count);
	for (let i = 0; i < count; i++) from[i] = i;
	let to = new Uint32Array(bounds.length > 2 ? count : 0);
	while (bounds.length > 2) {
		const next = [0];
		for (let run = 0; run + 1 < bounds.length; run += 2) {
			const low = bounds[run] ?? 0;
			const middle = bounds[run + 1] ?? count;
			const high = bounds[run + 2] ?? middle;
			merge(keys, from, to, low, middle, high);
			next.push(high);
		}
		[from, to] = [to, from];
		bounds = next;
	}
	return from;
}

/** Where ascending runs begin, and the end. */
function runsOf(keys: Float64Array): number[] {
	const bounds = [0];
	for (let i = 1; i < keys.length; i++) if ((keys[i - 1] ?? 0) > (keys[i] ?? 0)) bounds.push(i);
	if (keys.length > 0) bounds.push(keys.length);
	return bounds;
}

function merge(
	keys: Float64Array,
	from: Uint32Array,
	to: Uint32Array,
	low: number,
	middle: number,
	high: number
): void {
	let left = low;
	let right = middle;
	for (let at = low; at < high; at++) {
		const a = from[left] ?? 0;
		const b = from[right] ?? 0;
		if (left < middle && (right >= high || (keys[a] ?? 0) <= (keys[b] ?? 0))) {
			to[at] = a;
			left++;
		} else {
			to[at] = b;
			right++;
		}
	}
}
