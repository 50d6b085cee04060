import { sql } from 'drizzle-orm';
import type { Executor } from '../db/database';
import { designationCounter } from '../db/schema/transients';

/**
 * Designation of the `index`-th transient (1 = a, 26 = z, 27 = aa) whose T0 falls on that UTC day,
 * as `D26L01-b`: D, year, month letter A to L, day, letters in order of arrival.
 */
export function designationOf(t0: Date, index: number): string {
	const year = String(t0.getUTCFullYear() % 100).padStart(2, '0');
	const month = 'ABCDEFGHIJKL'[t0.getUTCMonth()];
	const day = String(t0.getUTCDate()).padStart(2, '0');
	return `D${year}${month}${day}-${lettersOf(index)}`;
}

function lettersOf(index: number): string {
	let letters = '';
	for (let rest = index; rest > 0; rest = Math.floor((rest - 1) / 26)) {
		letters = String.fromCharCode(97 + ((rest - 1) % 26)) + letters;
	}
	return letters;
}

/** Takes the next designation of T0's day; the counter's row is locked until the transaction ends. */
export async function nextDesignation(tx: Executor, t0: Date): Promise<string> {
	const [row] = await tx
		.insert(designationCounter)
		.values({ day: t0.toISOString().slice(0, 10), last: 1 })
		.onConflictDoUpdate({
			target: designationCounter.day,
			set: { last: sql`${designationCounter.last} + 1` }
		})
		.returning({ last: designationCounter.last });
	return designationOf(t0, row!.last);
}
