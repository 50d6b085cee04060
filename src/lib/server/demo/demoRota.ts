import type { Transaction } from '../db/database';
import { watch } from '../db/schema/network';
import type { SeededPeople } from './demoPeople';

const WATCH_MS = 8 * 3_600_000;
const WATCHES_A_DAY = 3;
const DAYS_BEFORE = 7;
const DAYS_AHEAD = 14;
/** Left open in the demo, so that the rota has a gap to show: this many watches ahead of the last one. */
const GAP_BEFORE_END = 7;
const DUTY_INITIALS = ['NH', 'MQ', 'HP'] as const;

/** Initials of who is first and second at `ms`: three people take turns in watches of 8 hours from 00:00 UTC. */
export function dutyAt(ms: number): { first: string; second: string } {
	const index = Math.floor(ms / WATCH_MS);
	const turn = (index + Math.floor(index / WATCHES_A_DAY)) % DUTY_INITIALS.length;
	return {
		first: DUTY_INITIALS[turn]!,
		second: DUTY_INITIALS[(turn + 1) % DUTY_INITIALS.length]!
	};
}

/** Inserts the watches from 7 days ago to 14 days ahead, one of them left open. */
export async function seedRota(
	tx: Transaction,
	people: SeededPeople,
	nowMs: number
): Promise<number> {
	const firstIndex = Math.floor(nowMs / WATCH_MS) - DAYS_BEFORE * WATCHES_A_DAY;
	const count = (DAYS_BEFORE + DAYS_AHEAD) * WATCHES_A_DAY + 1;
	const rows = Array.from({ length: count }, (_, index) => {
		const startMs = (firstIndex + index) * WATCH_MS;
		const { first, second } = dutyAt(startMs);
		return {
			during: { start: new Date(startMs), end: new Date(startMs + WATCH_MS) },
			firstPersonId: people.get(first)!.id,
			secondPersonId: people.get(second)!.id
		};
	}).filter((_, index) => index !== count - 1 - GAP_BEFORE_END);
	await tx.insert(watch).values(rows);
	return rows.length;
}
