import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Claim } from '../../domain/slot';
import { slotMayBecome } from '../../domain/slot';
import type { SlotState } from '../../domain/vocabulary';
import { sinceT0 } from '../../domain/duration';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { databaseErrorOf, type Executor, type Transaction } from '../db/database';
import { telescope, telescopeObserver } from '../db/schema/network';
import { person } from '../db/schema/people';
import { slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { computeOutlookFor, outlookBasis } from '../outlook/outlookService';
import { writeJournal } from '../transients/journalStore';
import { requireTransient } from '../transients/transientStore';
import { requireOpen } from '../transients/transientService';
import { tilesWithin } from './slotOffers';
import { requireUsable } from './slotSafety';

export type SlotRow = typeof slot.$inferSelect;

/** A claim may begin this long ago: the form was open for a while. */
const START_GRACE_MINUTES = 2;
/** Slewing may begin this long before a slot does (common practice, no source). */
const ON_SKY_EARLY_MINUTES = 15;

/**
 * Claims a telescope for a transient over a time range inside one of its windows. The pointing is
 * checked against all limits at this moment; overlapping claims are refused by PostgreSQL.
 *
 * @throws DomainError `slotTaken` with `heldBy`, `unsafePointing` with the limit that forbids it.
 */
export async function claimSlot(
	app: App,
	actor: Actor | null,
	claim: Claim
): Promise<{ slotId: string }> {
	requirePermission(actor, 'claimSlot');
	const range = { start: new Date(claim.startAt), end: new Date(claim.endAt) };
	if (range.start.getTime() < app.now().getTime() - START_GRACE_MINUTES * 60_000) {
		throw new DomainError('invalid', 'The start has passed.', [
			{ pointer: '/startAt', detail: 'must not lie in the past' }
		]);
	}
	const target = await requireTransient(app.database, claim.designation);
	requireOpen(target.state);
	if (target.isTest) {
		throw new DomainError('wrongState', 'This is a test; it takes no telescope time.');
	}
	const scope = await requireOwnTelescope(app.database, actor, claim.telescopeCode);
	const filter = claim.filter ?? scope.depths[0]?.filter ?? '';
	if (!scope.depths.some((depth) => depth.filter === filter)) {
		throw new DomainError('invalid', `${scope.name} has no filter ${filter}.`, [
			{
				pointer: '/filter',
				detail: `must be one of ${scope.depths.map((d) => d.filter).join(', ')}`
			}
		]);
	}
	const basis = await outlookBasis(app.database, target.id);
	if (!basis) throw new DomainError('wrongState', 'This transient has no region to point at.');
	const computed = await computeOutlookFor(app, basis, {
		from: range.start,
		telescopeId: scope.id
	});
	const row = computed.rows[0];
	requireUsable(row, range, scope.name);

	try {
		return await writeTransaction(app, async (tx, change) => {
			const now = app.now();
			const values = {
				during: range,
				state: 'claimed' as const,
				tiles: tilesWithin(row.plan, range),
				filter,
				exposureS: scope.exposureS,
				catch: row.catch,
				regionVersion: basis.regionVersion,
				claimedBy: actor.id,
				claimedAt: now
			};
			const slotId = await takeOfferOrInsert(tx, target.id, scope.id, values);
			change.touch(target.id);
			await writeJournal(tx, {
				transientId: target.id,
				kind: 'slotClaimed',
				at: now,
				actorId: actor.id,
				summary: `Claimed ${scope.name} from ${clock(range.start)} to ${clock(range.end)} UTC`,
				detail: {
					slotId,
					telescopeId: scope.id,
					telescope: scope.code,
					sinceT0: sinceT0(now.getTime() - target.t0.getTime())
				}
			});
			return { slotId };
		});
	} catch (error) {
		if (databaseErrorOf(error)?.code === '23P01') {
			throw await slotTaken(app.database, scope, range, actor);
		}
		throw error;
	}
}

type ClaimValues = Pick<
	typeof slot.$inferInsert,
	| 'during'
	| 'tiles'
	| 'filter'
	| 'exposureS'
	| 'catch'
	| 'regionVersion'
	| 'claimedBy'
	| 'claimedAt'
> & { state: 'claimed' };

async function takeOfferOrInsert(
	tx: Transaction,
	transientId: string,
	telescopeId: string,
	values: ClaimValues
): Promise<string> {
	const [offer] = await tx
		.select({ id: slot.id })
		.from(slot)
		.where(
			and(
				eq(slot.transientId, transientId),
				eq(slot.telescopeId, telescopeId),
				eq(slot.state, 'offered')
			)
		)
		.limit(1)
		.for('update', { skipLocked: true });
	const [stored] = offer
		? await tx.update(slot).set(values).where(eq(slot.id, offer.id)).returning({ id: slot.id })
		: await tx
				.insert(slot)
				.values({ transientId, telescopeId, ...values })
				.returning({ id: slot.id });
	return stored!.id;
}

async function requireOwnTelescope(executor: Executor, actor: Actor, code: string) {
	const [scope] = await executor.select().from(telescope).where(eq(telescope.code, code));
	if (!scope || scope.retiredAt) {
		throw new DomainError('notFound', `There is no telescope ${code} in service.`);
	}
	const [membership] = await executor
		.select()
		.from(telescopeObserver)
		.where(
			and(eq(telescopeObserver.telescopeId, scope.id), eq(telescopeObserver.personId, actor.id))
		);
	if (!membership) {
		throw new DomainError('notAllowed', `You are not an observer of ${scope.name}.`);
	}
	return scope;
}

async function slotTaken(
	executor: Executor,
	scope: { id: string; name: string },
	range: { start: Date; end: Date },
	actor: Actor
): Promise<DomainError> {
	const [held] = await executor
		.select({ slot, person, designation: transient.designation })
		.from(slot)
		.innerJoin(person, eq(person.id, slot.claimedBy))
		.innerJoin(transient, eq(transient.id, slot.transientId))
		.where(
			and(
				eq(slot.telescopeId, scope.id),
				inArray(slot.state, ['claimed', 'on sky', 'reported']),
				sql`${slot.during} && tstzrange(${range.start.toISOString()}, ${range.end.toISOString()})`
			)
		)
		.orderBy(slot.during)
		.limit(1);
	// The holder may have released it in this very moment.
	if (!held) return new DomainError('slotTaken', 'Somebody else claimed this just now. Try again.');
	const who = held.person.id === actor.id ? 'You have' : `${held.person.name} has`;
	return new DomainError(
		'slotTaken',
		`${who} ${scope.name} from ${clock(held.slot.during.start)} to ${clock(held.slot.during.end)} UTC for ${held.designation}.`,
		[],
		{
			heldBy: {
				name: held.person.name,
				initials: held.person.initials,
				designation: held.designation,
				startAt: held.slot.during.start.toISOString(),
				endAt: held.slot.during.end.toISOString()
			}
		}
	);
}

/** Gives a claimed telescope back; by its holder, or a steward. */
export async function releaseSlot(app: App, actor: Actor | null, slotId: string): Promise<void> {
	requirePermission(actor, 'releaseSlot');
	await moveSlot(app, actor, slotId, 'released', 'slotReleased', (name) => `Released ${name}`);
}

/** Says that the telescope points at the target: the first exposure begins. */
export async function startSlot(app: App, actor: Actor | null, slotId: string): Promise<void> {
	requirePermission(actor, 'claimSlot');
	await moveSlot(app, actor, slotId, 'on sky', 'onSky', (name) => `${name} is on sky`);
}

async function moveSlot(
	app: App,
	actor: Actor,
	slotId: string,
	to: SlotState,
	kind: 'slotReleased' | 'onSky',
	summary: (telescopeName: string) => string
): Promise<void> {
	await writeTransaction(app, async (tx, change) => {
		const { row, telescopeName } = await lockOwnSlot(tx, actor, slotId, to === 'released');
		if (row.state === to) return;
		requireTransition(row.state, to);
		const now = app.now();
		const earliest = new Date(row.during.start.getTime() - ON_SKY_EARLY_MINUTES * 60_000);
		if (to === 'on sky' && now < earliest) {
			throw new DomainError('wrongState', `This slot begins at ${clock(row.during.start)} UTC.`);
		}
		await tx
			.update(slot)
			.set({
				state: to,
				...(to === 'on sky' ? { onSkyAt: now } : { endedAt: now })
			})
			.where(eq(slot.id, row.id));
		change.touch(row.transientId);
		await writeJournal(tx, {
			transientId: row.transientId,
			kind,
			at: now,
			actorId: actor.id,
			summary: summary(telescopeName),
			detail: { slotId: row.id, telescopeId: row.telescopeId }
		});
	});
}

export function requireTransition(from: SlotState, to: SlotState): void {
	if (!slotMayBecome(from, to)) {
		throw new DomainError('wrongState', `A slot that is ${from} can’t become ${to}.`, [], {
			state: from
		});
	}
}

/** Locks a slot that the actor holds (or any, for a steward where `stewardToo`). */
export async function lockOwnSlot(
	tx: Transaction,
	actor: Actor,
	slotId: string,
	stewardToo = false
): Promise<{ row: SlotRow; telescopeName: string; telescopeCode: string }> {
	const [row] = await tx.select().from(slot).where(eq(slot.id, slotId)).for('update');
	if (!row) throw new DomainError('notFound', 'There is no such slot.');
	if (row.claimedBy !== actor.id && !(stewardToo && actor.roles.includes('steward'))) {
		throw new DomainError('notAllowed', 'Only the observer who claimed this slot may do that.');
	}
	const [scope] = await tx.select().from(telescope).where(eq(telescope.id, row.telescopeId));
	return { row, telescopeName: scope!.name, telescopeCode: scope!.code };
}

function clock(at: Date): string {
	return at.toISOString().slice(11, 16);
}
