import { eq } from 'drizzle-orm';
import type { DecisionInput } from '../../domain/decision';
import { sinceT0 } from '../../domain/duration';
import { DECISION_LABELS } from '../../domain/vocabulary';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { outlook, transient } from '../db/schema/transients';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { refreshOffers } from '../slots/slotOffers';
import { writeJournal } from './journalStore';
import { lockTransient, nameOf } from './transientStore';

/** Acknowledges a transient and owns its decision; the first one wins, again by the same person is no change. */
export async function takeTransient(
	app: App,
	actor: Actor | null,
	designation: string
): Promise<{ designation: string; takenAt: string }> {
	requirePermission(actor, 'takeTransient');
	return writeTransaction(app, async (tx, change) => {
		const row = await lockTransient(tx, designation);
		if (row.takenBy && row.takenAt) {
			if (row.takenBy === actor.id) return { designation, takenAt: row.takenAt.toISOString() };
			const name = await nameOf(tx, row.takenBy);
			throw new DomainError(
				'alreadyTaken',
				`${name} took this at ${sinceT0(row.takenAt.getTime() - row.t0.getTime())}.`,
				[],
				{ takenBy: name }
			);
		}
		requireOpen(row.state);
		const now = app.now();
		await tx
			.update(transient)
			.set({ takenBy: actor.id, takenAt: now })
			.where(eq(transient.id, row.id));
		change.touch(row.id);
		await writeJournal(tx, {
			transientId: row.id,
			kind: 'taken',
			at: now,
			actorId: actor.id,
			summary: `Taken at ${sinceT0(now.getTime() - row.t0.getTime())}`
		});
		return { designation, takenAt: now.toISOString() };
	});
}

/**
 * Chase, park or drop. Somebody must have taken the transient; changing a decision, or deciding what
 * another person took, needs a reason.
 */
export async function decideTransient(
	app: App,
	actor: Actor | null,
	designation: string,
	input: DecisionInput
): Promise<{ designation: string; decision: string; decidedAt: string }> {
	requirePermission(actor, 'decideTransient');
	return writeTransaction(app, async (tx, change) => {
		const row = await lockTransient(tx, designation);
		const now = app.now();
		if (!row.takenBy) throw new DomainError('wrongState', 'Take it first, then decide.');
		if (row.decision === input.decision && row.decidedAt) {
			return { designation, decision: row.decision, decidedAt: row.decidedAt.toISOString() };
		}
		if (row.state === 'retracted') requireOpen(row.state);
		const reason = input.reason.trim();
		if (row.decision && !reason) {
			throw new DomainError('invalid', 'Say why the decision changes.', [
				{ pointer: '/reason', detail: 'is needed when a decision changes' }
			]);
		}
		if (row.takenBy !== actor.id && !reason) {
			const name = await nameOf(tx, row.takenBy);
			throw new DomainError('invalid', `${name} took this. Say why you decide instead.`, [
				{ pointer: '/reason', detail: `is needed, as ${name} took this` }
			]);
		}
		await tx
			.update(transient)
			.set({
				decision: input.decision,
				decidedBy: actor.id,
				decidedAt: now,
				decisionReason: reason,
				state: 'open'
			})
			.where(eq(transient.id, row.id));
		change.touch(row.id);
		await writeJournal(tx, {
			transientId: row.id,
			kind: 'decided',
			at: now,
			actorId: actor.id,
			summary: `Decided: ${DECISION_LABELS[input.decision].toLowerCase()}${row.decision ? `, was ${row.decision}` : ''}${reason ? ` (${reason})` : ''}`,
			detail: { decision: input.decision, before: row.decision, reason }
		});
		const [stored] = await tx
			.select({ body: outlook.body, regionVersion: outlook.regionVersion })
			.from(outlook)
			.where(eq(outlook.transientId, row.id));
		if (stored) {
			const rows = () => stored.body.rows;
			await refreshOffers(tx, row.id, rows, stored.regionVersion, now);
		}
		return { designation, decision: input.decision, decidedAt: now.toISOString() };
	});
}

export function requireOpen(state: string): void {
	if (state === 'retracted') {
		throw new DomainError('wrongState', 'This transient was retracted.');
	}
	if (state === 'closed') throw new DomainError('wrongState', 'This transient is closed.');
}
