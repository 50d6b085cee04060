import { and, eq } from 'drizzle-orm';
import type { ClosureInput } from '../../domain/telescope';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import { closure, telescopeObserver } from '../db/schema/network';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { askForOutlooks, requireTelescope, type TelescopeRow } from './telescopeService';

/** Closes a telescope for a stretch of time; outlooks and claims respect it from the next moment on. */
export async function addClosure(
	app: App,
	actor: Actor | null,
	code: string,
	input: ClosureInput
): Promise<{ id: string }> {
	requirePermission(actor, 'closeTelescope');
	const during = { start: new Date(input.startAt), end: new Date(input.endAt) };
	if (during.end <= app.now()) {
		const detail = 'The end lies in the past.';
		throw new DomainError('invalid', detail, [{ pointer: '/endAt', detail }]);
	}
	return writeTransaction(app, async (tx, change) => {
		const row = await requireTelescope(tx, code);
		await requireOwn(tx, actor, row);
		const [stored] = await tx
			.insert(closure)
			.values({
				telescopeId: row.id,
				during,
				reason: input.reason,
				enteredBy: actor.id,
				enteredAt: app.now()
			})
			.returning({ id: closure.id });
		change.touchNetwork();
		await askForOutlooks(app, tx, `${code} is closed: ${input.reason}`.slice(0, 200));
		return stored!;
	});
}

/** Takes a closure back. */
export async function removeClosure(
	app: App,
	actor: Actor | null,
	code: string,
	closureId: string
): Promise<void> {
	requirePermission(actor, 'closeTelescope');
	await writeTransaction(app, async (tx, change) => {
		const row = await requireTelescope(tx, code);
		await requireOwn(tx, actor, row);
		const removed = await tx
			.delete(closure)
			.where(and(eq(closure.id, closureId), eq(closure.telescopeId, row.id)))
			.returning({ id: closure.id });
		if (removed.length === 0)
			throw new DomainError('notFound', 'This closure was taken back already.');
		change.touchNetwork();
		await askForOutlooks(app, tx, `${code} is open again`);
	});
}

/** Observers close the telescopes they work with; stewards any. */
async function requireOwn(tx: Transaction, actor: Actor, row: TelescopeRow): Promise<void> {
	if (actor.roles.includes('steward')) return;
	const [works] = await tx
		.select({ personId: telescopeObserver.personId })
		.from(telescopeObserver)
		.where(
			and(eq(telescopeObserver.telescopeId, row.id), eq(telescopeObserver.personId, actor.id))
		);
	if (!works) throw new DomainError('notAllowed', `You don’t work with ${row.name}.`);
}
