import type { HorizonPoint } from '$lib/sky/visibility/telescope';

/**
 * The lowest usable altitude from azimuth 0 to 360 for drawing: the mask, straight between its points and
 * across north, where it lies above the lowest altitude.
 */
export function maskProfile(points: readonly HorizonPoint[], minAltDeg: number): HorizonPoint[] {
	const sorted = [...points].sort((a, b) => a.azDeg - b.azDeg);
	const first = sorted[0];
	const last = sorted.at(-1);
	if (!first || !last || sorted.length < 2) {
		return [0, 360].map((azDeg) => ({ azDeg, altDeg: minAltDeg }));
	}
	const around = [
		{ ...last, azDeg: last.azDeg - 360 },
		...sorted,
		{ ...first, azDeg: first.azDeg + 360 }
	];
	const profile: HorizonPoint[] = [];
	for (let index = 1; index < around.length; index++) {
		const from = around[index - 1]!;
		const to = around[index]!;
		for (const share of crossings(from, to, minAltDeg)) {
			const azDeg = from.azDeg + share * (to.azDeg - from.azDeg);
			const altDeg = from.altDeg + share * (to.altDeg - from.altDeg);
			if (azDeg >= 0 && azDeg <= 360) {
				profile.push({ azDeg, altDeg: Math.max(altDeg, minAltDeg) });
			}
		}
	}
	return profile;
}

/** Shares of the way at which a corner can lie: both ends, north, and where the lowest altitude is crossed. */
function crossings(from: HorizonPoint, to: HorizonPoint, minAltDeg: number): number[] {
	const shares = [0, 1];
	for (const northDeg of [0, 360]) {
		if (from.azDeg < northDeg && northDeg < to.azDeg) {
			shares.push((northDeg - from.azDeg) / (to.azDeg - from.azDeg));
		}
	}
	const rise = to.altDeg - from.altDeg;
	const share = rise === 0 ? NaN : (minAltDeg - from.altDeg) / rise;
	if (share > 0 && share < 1) shares.push(share);
	return shares.sort((a, b) => a - b);
}
