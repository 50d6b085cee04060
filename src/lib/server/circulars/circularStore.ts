import { and, count, desc, eq, ilike, isNotNull, lt, or, sql } from 'drizzle-orm';
import type { CircularSummary, DeliveryRow } from '../../domain/circular';
import type { DeliveryState } from '../../domain/vocabulary';
import type { Executor, Transaction } from '../db/database';
import { circular, circularCounter, delivery } from '../db/schema/circulars';
import { person } from '../db/schema/people';
import { transient } from '../db/schema/transients';

/**
 * Locks the counter until the transaction ends and gives the last number used. One publication at a
 * time gets past this point, so numbers have no gaps: one that fails gives its number back.
 */
export async function lockLastNumber(tx: Transaction): Promise<number> {
	const [row] = await tx
		.select({ last: circularCounter.last })
		.from(circularCounter)
		.where(eq(circularCounter.series, 'circular'))
		.for('update');
	return row!.last;
}

export async function keepLastNumber(tx: Transaction, last: number): Promise<void> {
	await tx.update(circularCounter).set({ last }).where(eq(circularCounter.series, 'circular'));
}

const summaryColumns = {
	number: circular.number,
	designation: transient.designation,
	title: circular.title,
	publishedAt: circular.publishedAt,
	author: { id: person.id, name: person.name, initials: person.initials }
};

export type CircularFilter = {
	designation?: string;
	/** Words to find in title, text or designation. */
	search?: string;
	/** Only numbers below this one: the next page. */
	before?: number;
	/** Only those delivered to this person. */
	deliveredTo?: string;
	limit: number;
};

/** Published circulars, newest first, with how each went to `readerId`. */
export async function readCirculars(
	executor: Executor,
	readerId: string,
	filter: CircularFilter
): Promise<CircularSummary[]> {
	const toReader = (person: string) =>
		sql`${delivery.circularId} = ${circular.id} and ${delivery.personId} = ${person}`;
	// The best of the channels: what arrived once has arrived.
	const toMe = sql<DeliveryState | null>`(
		select ${delivery.state} from ${delivery} where ${toReader(readerId)}
		order by array_position(array['sent', 'queued', 'failed'], ${delivery.state}) limit 1
	)`;
	const pattern = filter.search ? `%${filter.search.replace(/[\\%_]/g, '\\$&')}%` : null;
	const rows = await executor
		.select({ ...summaryColumns, toMe })
		.from(circular)
		.innerJoin(transient, eq(transient.id, circular.transientId))
		.innerJoin(person, eq(person.id, circular.authorId))
		.where(
			and(
				isNotNull(circular.publishedAt),
				filter.designation ? eq(transient.designation, filter.designation) : undefined,
				filter.before ? lt(circular.number, filter.before) : undefined,
				pattern
					? or(
							ilike(circular.title, pattern),
							ilike(circular.body, pattern),
							ilike(transient.designation, pattern)
						)
					: undefined,
				filter.deliveredTo
					? sql`exists (select 1 from ${delivery} where ${toReader(filter.deliveredTo)})`
					: undefined
			)
		)
		.orderBy(desc(circular.number))
		.limit(filter.limit);
	return rows.map((row) => ({
		...row,
		number: row.number!,
		publishedAt: row.publishedAt!.toISOString()
	}));
}

/** One published circular, or null. */
export async function readCircular(executor: Executor, number: number) {
	const [row] = await executor
		.select({ ...summaryColumns, id: circular.id, body: circular.body })
		.from(circular)
		.innerJoin(transient, eq(transient.id, circular.transientId))
		.innerJoin(person, eq(person.id, circular.authorId))
		.where(and(eq(circular.number, number), isNotNull(circular.publishedAt)));
	return row ? { ...row, number: row.number!, publishedAt: row.publishedAt! } : null;
}

export async function countDeliveries(
	executor: Executor,
	circularId: string
): Promise<Record<DeliveryState, number>> {
	const rows = await executor
		.select({ state: delivery.state, count: count() })
		.from(delivery)
		.where(eq(delivery.circularId, circularId))
		.groupBy(delivery.state);
	const counts: Record<DeliveryState, number> = { queued: 0, sent: 0, failed: 0 };
	for (const row of rows) counts[row.state] = row.count;
	return counts;
}

/** The delivery ledger of one circular: what failed first, then by name. */
export async function readDeliveries(
	executor: Executor,
	circularId: string
): Promise<DeliveryRow[]> {
	const rows = await executor
		.select({
			id: delivery.id,
			person: { name: person.name, organisation: person.organisation },
			channel: delivery.channel,
			state: delivery.state,
			attempts: delivery.attempts,
			lastError: delivery.lastError,
			queuedAt: delivery.queuedAt,
			endedAt: delivery.endedAt
		})
		.from(delivery)
		.innerJoin(person, eq(person.id, delivery.personId))
		.where(eq(delivery.circularId, circularId))
		.orderBy(
			sql`array_position(array['failed', 'queued', 'sent'], ${delivery.state})`,
			person.name,
			delivery.channel
		);
	return rows.map((row) => ({
		...row,
		queuedAt: row.queuedAt.toISOString(),
		endedAt: row.endedAt?.toISOString() ?? null
	}));
}
