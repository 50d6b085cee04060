import { and, eq, ne, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Executor } from '../db/database';
import type { TimeRange } from '../db/columns';
import { watch } from '../db/schema/network';
import { person } from '../db/schema/people';

const first = alias(person, 'first_person');
const second = alias(person, 'second_person');

export type StoredWatch = {
	id: string;
	during: TimeRange;
	first: { id: string; name: string; initials: string };
	second: { id: string; name: string; initials: string } | null;
	/** False when the first was disabled or is no duty scientist any more. */
	firstServes: boolean;
};

/** Watches that touch [start, end), in order. */
export async function watchesBetween(
	executor: Executor,
	start: Date,
	end: Date
): Promise<StoredWatch[]> {
	return executor
		.select({
			id: watch.id,
			during: watch.during,
			first: { id: first.id, name: first.name, initials: first.initials },
			second: { id: second.id, name: second.name, initials: second.initials },
			firstServes: sql<boolean>`'duty' = any(${first.roles}) and ${first.disabledAt} is null`
		})
		.from(watch)
		.innerJoin(first, eq(first.id, watch.firstPersonId))
		.leftJoin(second, eq(second.id, watch.secondPersonId))
		.where(
			sql`${watch.during} && tstzrange(${start.toISOString()}::timestamptz, ${end.toISOString()}::timestamptz)`
		)
		.orderBy(sql`lower(${watch.during})`);
}

/** The watch that overlaps `during`, other than `exceptId`, with its first person's name. */
export async function overlappingWatch(
	executor: Executor,
	during: TimeRange,
	exceptId: string | null
): Promise<{ during: TimeRange; name: string } | null> {
	const overlaps = sql`${watch.during} && tstzrange(${during.start.toISOString()}::timestamptz, ${during.end.toISOString()}::timestamptz)`;
	const [found] = await executor
		.select({ during: watch.during, name: first.name })
		.from(watch)
		.innerJoin(first, eq(first.id, watch.firstPersonId))
		.where(exceptId ? and(overlaps, ne(watch.id, exceptId)) : overlaps)
		.orderBy(sql`lower(${watch.during})`)
		.limit(1);
	return found ?? null;
}
