import { eq } from 'drizzle-orm';
import type { Executor, Transaction } from '../db/database';
import { person } from '../db/schema/people';
import { transient } from '../db/schema/transients';
import { DomainError } from '../domainError';

export type TransientRow = typeof transient.$inferSelect;

/** The transient with this designation, or `notFound`. */
export async function requireTransient(
	executor: Executor,
	designation: string
): Promise<TransientRow> {
	const [row] = await executor
		.select()
		.from(transient)
		.where(eq(transient.designation, designation));
	if (!row) throw new DomainError('notFound', `There is no transient ${designation}.`);
	return row;
}

/** The same, with its row locked until the transaction ends. */
export async function lockTransient(tx: Transaction, designation: string): Promise<TransientRow> {
	const [row] = await tx
		.select()
		.from(transient)
		.where(eq(transient.designation, designation))
		.for('update');
	if (!row) throw new DomainError('notFound', `There is no transient ${designation}.`);
	return row;
}

export async function nameOf(executor: Executor, personId: string): Promise<string> {
	const [row] = await executor
		.select({ name: person.name })
		.from(person)
		.where(eq(person.id, personId));
	return row?.name ?? 'somebody';
}
