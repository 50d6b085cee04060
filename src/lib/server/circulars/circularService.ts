import { randomUUID } from 'node:crypto';
import { and, desc, eq, sql } from 'drizzle-orm';
import {
	type CircularDetail,
	type CircularDraft,
	type CircularSummary,
	type PublishInput
} from '../../domain/circular';
import { allows } from '../../domain/permissions';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { circular, delivery } from '../db/schema/circulars';
import { transient } from '../db/schema/transients';
import type { Executor, Transaction } from '../db/database';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { deliverCircularJob } from './deliverCircularJob';
import { writeJournal } from '../transients/journalStore';
import { readCircularRecord } from './circularRecord';
import {
	countDeliveries,
	keepLastNumber,
	lockLastNumber,
	readCircular,
	readCirculars,
	readDeliveries
} from './circularStore';
import { circularText } from './circularText';
import { recipientsOf } from './recipients';

/** A pre-filled title and text from what the record holds now; nothing is written. */
export async function draftCircular(
	app: App,
	actor: Actor | null,
	designation: string
): Promise<CircularDraft> {
	requirePermission(actor, 'writeCircular');
	const subject = await requirePublishable(app.database, designation);
	const record = await readCircularRecord(app.database, subject, actor.id, app.now());
	const recipients = await recipientsOf(app.database, subject.id, app.config.vapid !== null);
	return {
		draftId: randomUUID(),
		designation: subject.designation,
		...circularText(record),
		recipients: {
			email: recipients.filter(({ channel }) => channel === 'email').length,
			push: recipients.filter(({ channel }) => channel === 'push').length
		}
	};
}

/** The transients that a circular can be written about, latest first, with how many they have. */
export async function publishableTransients(
	app: App,
	actor: Actor | null
): Promise<{ designation: string; t0: string; circulars: number }[]> {
	requirePermission(actor, 'writeCircular');
	const rows = await app.database
		.select({
			designation: transient.designation,
			t0: transient.t0,
			circulars: sql<number>`(select count(*)::int from ${circular} where ${circular.transientId} = ${transient.id})`
		})
		.from(transient)
		.where(and(eq(transient.isTest, false), eq(transient.isDrill, false)))
		.orderBy(desc(transient.t0))
		.limit(50);
	return rows.map((row) => ({ ...row, t0: row.t0.toISOString() }));
}

/**
 * Gives the circular the next number and queues it for everybody who asked, in one transaction.
 * The same draft published again is the same circular; with another text it is refused.
 */
export async function publishCircular(
	app: App,
	actor: Actor | null,
	input: PublishInput
): Promise<{ number: number; created: boolean }> {
	requirePermission(actor, 'writeCircular');
	return writeTransaction(app, async (tx, change) => {
		const last = await lockLastNumber(tx);
		const known = await publishedFrom(tx, actor, input);
		if (known !== null) return { number: known, created: false };

		const subject = await requirePublishable(tx, input.designation);
		const number = last + 1;
		const at = app.now();
		await keepLastNumber(tx, number);
		await tx.insert(circular).values({
			id: input.draftId,
			number,
			transientId: subject.id,
			title: input.title,
			body: input.body,
			authorId: actor.id,
			createdAt: at,
			publishedAt: at
		});
		await queueDeliveries(app, tx, input.draftId, subject.id, at);
		await writeJournal(tx, {
			transientId: subject.id,
			kind: 'circularPublished',
			at,
			actorId: actor.id,
			summary: `Published circular ${number}: ${input.title}`,
			detail: { number, circularId: input.draftId }
		});
		change.touch(subject.id);
		return { number, created: true };
	});
}

export type CircularPage = { circulars: CircularSummary[]; olderBefore: number | null };

const PAGE_SIZE = 50;

/** The archive, newest first, 50 at a time. */
export async function listCirculars(
	app: App,
	actor: Actor | null,
	filter: { designation?: string; search?: string; before?: number; onlyMine?: boolean } = {}
): Promise<CircularPage> {
	requirePermission(actor, 'viewCirculars');
	const { onlyMine, ...rest } = filter;
	const circulars = await readCirculars(app.database, actor.id, {
		...rest,
		...(onlyMine ? { deliveredTo: actor.id } : {}),
		limit: PAGE_SIZE + 1
	});
	const page = circulars.slice(0, PAGE_SIZE);
	return {
		circulars: page,
		olderBefore: circulars.length > PAGE_SIZE ? page.at(-1)!.number : null
	};
}

/** One published circular, with as much of its deliveries as the reader may see. */
export async function circularDetail(
	app: App,
	actor: Actor | null,
	number: number
): Promise<CircularDetail> {
	requirePermission(actor, 'viewCirculars');
	const found = await readCircular(app.database, number);
	if (!found) throw new DomainError('notFound', `There is no circular ${number}.`);
	const team = allows(actor.roles, 'viewTransients');
	const names = allows(actor.roles, 'viewDeliveries');
	return {
		number: found.number,
		designation: found.designation,
		title: found.title,
		body: found.body,
		publishedAt: found.publishedAt.toISOString(),
		author: found.author,
		deliveryCounts: team ? await countDeliveries(app.database, found.id) : null,
		deliveries: names ? await readDeliveries(app.database, found.id) : null
	};
}

async function requirePublishable(executor: Executor, designation: string) {
	const [found] = await executor
		.select()
		.from(transient)
		.where(eq(transient.designation, designation));
	if (!found) throw new DomainError('notFound', `There is no transient ${designation}.`);
	if (found.isDrill) {
		throw new DomainError(
			'wrongState',
			`${designation} is a drill: nothing of it goes to partners.`
		);
	}
	if (found.isTest) {
		throw new DomainError(
			'wrongState',
			`${designation} is a test: nothing of it goes to partners.`
		);
	}
	return found;
}

/** The number under which this draft is out already, or null. */
async function publishedFrom(
	tx: Transaction,
	actor: Actor,
	input: PublishInput
): Promise<number | null> {
	const [known] = await tx
		.select({
			number: circular.number,
			title: circular.title,
			body: circular.body,
			authorId: circular.authorId,
			designation: transient.designation
		})
		.from(circular)
		.innerJoin(transient, eq(transient.id, circular.transientId))
		.where(eq(circular.id, input.draftId));
	if (!known) return null;
	const same =
		known.number !== null &&
		known.authorId === actor.id &&
		known.designation === input.designation &&
		known.title === input.title &&
		known.body === input.body;
	if (same) return known.number;
	throw new DomainError(
		'wrongState',
		known.number === null
			? 'This draft belongs to another text. Start a new one.'
			: `This draft went out as circular ${known.number} and can’t change any more. Start a new one.`
	);
}

async function queueDeliveries(
	app: App,
	tx: Transaction,
	circularId: string,
	transientId: string,
	at: Date
): Promise<void> {
	const recipients = await recipientsOf(tx, transientId, app.config.vapid !== null);
	if (recipients.length === 0) return;
	const rows = await tx
		.insert(delivery)
		.values(recipients.map((recipient) => ({ ...recipient, circularId, queuedAt: at })))
		.returning({ id: delivery.id });
	for (const { id } of rows) await app.queue.enqueue(tx, deliverCircularJob, { deliveryId: id });
}
