import { and, eq, inArray } from 'drizzle-orm';
import type { MembershipInput, MergeInput } from '../../domain/regroup';
import { requirePermission, type Actor } from '../actor';
import { lockTriage, type AlertRow } from '../alerts/alertStore';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import { alert, stream } from '../db/schema/alerts';
import { circular } from '../db/schema/circulars';
import { report, slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { writeTransaction, type Change } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { nextDesignation } from './designation';
import { writeJournal } from './journalStore';
import { deriveRegion } from './regionService';
import { lockTransient, type TransientRow } from './transientStore';

/**
 * Says where an alert belongs: confirms it, gives it a transient of its own, or moves it. Both regions
 * are derived anew; claims and reports stay with the transient they were made for.
 */
export async function setMembership(
	app: App,
	actor: Actor | null,
	alertId: string,
	input: MembershipInput
): Promise<{ designation: string }> {
	requirePermission(actor, 'regroupAlerts');
	return writeTransaction(app, async (tx, change) => {
		await lockTriage(tx);
		const moving = await requireAlert(tx, alertId);
		const from = await transientById(tx, moving.alert.transientId);
		const name = `${moving.streamName} ${moving.alert.packetId}`;
		if (input.action === 'confirm') {
			await tx.update(alert).set({ membership: 'joined' }).where(eq(alert.id, alertId));
			change.touch(from.id);
			await writeJournal(tx, {
				transientId: from.id,
				kind: 'membershipConfirmed',
				at: app.now(),
				actorId: actor.id,
				summary: `Confirmed that ${name} belongs here`,
				detail: { alertId }
			});
			return { designation: from.designation };
		}
		const to =
			input.action === 'move'
				? await requireTarget(tx, input.to, from)
				: await ownTransient(app, tx, moving.alert, from);
		await moveAlerts(tx, [moving.alert.id], to.id);
		await writeJournal(
			tx,
			{
				transientId: from.id,
				kind: input.action === 'split' ? 'split' : 'alertMoved',
				at: app.now(),
				actorId: actor.id,
				summary: `${name} moved to ${to.designation}`,
				detail: { alertId, to: to.designation }
			},
			{
				transientId: to.id,
				kind: 'alertMoved',
				at: app.now(),
				actorId: actor.id,
				summary: `${name} came from ${from.designation}`,
				detail: { alertId, from: from.designation }
			}
		);
		await deriveBoth(app, tx, change, from, to, `${name} moved`);
		return { designation: to.designation };
	});
}

/** Puts everything of one transient into another and closes the first. */
export async function mergeTransients(
	app: App,
	actor: Actor | null,
	designation: string,
	input: MergeInput
): Promise<{ designation: string }> {
	requirePermission(actor, 'regroupAlerts');
	return writeTransaction(app, async (tx, change) => {
		await lockTriage(tx);
		const from = await lockTransient(tx, designation);
		const to = await requireTarget(tx, input.into, from);
		const rows = await tx
			.select({ id: alert.id })
			.from(alert)
			.where(eq(alert.transientId, from.id));
		await tx
			.update(slot)
			.set({ state: 'lapsed', endedAt: app.now() })
			.where(and(eq(slot.transientId, from.id), eq(slot.state, 'offered')));
		await moveAlerts(
			tx,
			rows.map((row) => row.id),
			to.id
		);
		// It is one source: what was done for the first was done for the second.
		for (const table of [slot, report, circular]) {
			await tx.update(table).set({ transientId: to.id }).where(eq(table.transientId, from.id));
		}
		await writeJournal(
			tx,
			{
				transientId: from.id,
				kind: 'merged',
				at: app.now(),
				actorId: actor.id,
				summary: `Merged into ${to.designation}`,
				detail: { into: to.designation }
			},
			{
				transientId: to.id,
				kind: 'merged',
				at: app.now(),
				actorId: actor.id,
				summary: `${from.designation} was merged into this`,
				detail: { from: from.designation }
			}
		);
		await tx.update(transient).set({ state: 'closed' }).where(eq(transient.id, from.id));
		change.touch(from.id);
		await deriveRegion(app, tx, change, to.id, `${from.designation} merged into this`);
		return { designation: to.designation };
	});
}

async function requireAlert(
	tx: Transaction,
	id: string
): Promise<{ alert: AlertRow; streamName: string }> {
	const [row] = await tx
		.select({ alert, streamName: stream.name })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(eq(alert.id, id));
	if (!row) throw new DomainError('notFound', 'There is no such alert.');
	return row;
}

async function transientById(tx: Transaction, id: string): Promise<TransientRow> {
	const [row] = await tx.select().from(transient).where(eq(transient.id, id)).for('update');
	return row!;
}

async function requireTarget(
	tx: Transaction,
	designation: string,
	from: TransientRow
): Promise<TransientRow> {
	const to = await lockTransient(tx, designation);
	if (to.id === from.id) throw new DomainError('wrongState', 'It is in that transient already.');
	if (to.isTest !== from.isTest || to.isDrill !== from.isDrill) {
		throw new DomainError(
			'wrongState',
			'Tests and drills are never put together with real alerts.'
		);
	}
	return to;
}

async function ownTransient(
	app: App,
	tx: Transaction,
	moving: AlertRow,
	from: TransientRow
): Promise<TransientRow> {
	const others = await tx.$count(alert, eq(alert.transientId, from.id));
	if (others < 2) throw new DomainError('wrongState', 'It is the only alert of this transient.');
	const [row] = await tx
		.insert(transient)
		.values({
			designation: await nextDesignation(tx, moving.t0),
			t0: moving.t0,
			firstReceivedAt: moving.receivedAt,
			isTest: from.isTest,
			isDrill: from.isDrill
		})
		.returning();
	return row!;
}

async function moveAlerts(tx: Transaction, ids: string[], transientId: string): Promise<void> {
	await tx
		.update(alert)
		.set({ transientId, membership: 'moved', logOdds: null })
		.where(inArray(alert.id, ids));
}

async function deriveBoth(
	app: App,
	tx: Transaction,
	change: Change,
	from: TransientRow,
	to: TransientRow,
	cause: string
): Promise<void> {
	await deriveRegion(app, tx, change, from.id, cause);
	await deriveRegion(app, tx, change, to.id, cause);
}
