import { and, asc, eq, isNull, ne, sql } from 'drizzle-orm';
import type { Invite, PersonEdit, PersonState, PersonView } from '../../domain/person';
import type { Role } from '../../domain/vocabulary';
import { allows } from '../../domain/permissions';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { databaseErrorOf, type Transaction } from '../db/database';
import { telescope, telescopeObserver } from '../db/schema/network';
import { person, session } from '../db/schema/people';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { sendInvitationJob } from './sendInvitationJob';

type PersonRow = typeof person.$inferSelect;

/** Everybody, those who can sign in first; e-mail addresses for stewards only. */
export async function listPeople(app: App, actor: Actor | null): Promise<PersonView[]> {
	requirePermission(actor, 'viewNetwork');
	const showEmail = allows(actor.roles, 'editPeople');
	const rows = await app.database
		.select()
		.from(person)
		.orderBy(sql`${person.disabledAt} is not null`, asc(person.name));
	const telescopes = await app.database
		.select({ personId: telescopeObserver.personId, code: telescope.code })
		.from(telescopeObserver)
		.innerJoin(telescope, eq(telescope.id, telescopeObserver.telescopeId))
		.where(isNull(telescope.retiredAt))
		.orderBy(telescope.code);
	return rows.map((row) => ({
		id: row.id,
		name: row.name,
		initials: row.initials,
		email: showEmail ? row.email : null,
		organisation: row.organisation,
		roles: row.roles,
		state: stateOf(row),
		invitedAt: row.invitedAt.toISOString(),
		joinedAt: row.joinedAt?.toISOString() ?? null,
		telescopeCodes: telescopes.filter(({ personId }) => personId === row.id).map(({ code }) => code)
	}));
}

/** Invites somebody by e-mail; the mail is queued in the same transaction. */
export async function invitePerson(
	app: App,
	actor: Actor | null,
	input: Invite
): Promise<{ id: string }> {
	requirePermission(actor, 'editPeople');
	try {
		return await writeTransaction(app, async (tx) => {
			const [known] = await tx.select().from(person).where(eq(person.email, input.email));
			if (known) throw addressInUse(known);
			await requireFreeInitials(tx, input.initials, null);
			const [row] = await tx
				.insert(person)
				.values({ ...input, invitedAt: app.now() })
				.returning({ id: person.id });
			const payload = { personId: row!.id, invitedBy: actor.name };
			await app.queue.enqueue(tx, sendInvitationJob, payload);
			return row!;
		});
	} catch (error) {
		if (databaseErrorOf(error)?.code !== '23505') throw error;
		throw addressInUse(null);
	}
}

/** Sends the invitation of somebody who has not signed in yet once more. */
export async function inviteAgain(app: App, actor: Actor | null, personId: string): Promise<void> {
	requirePermission(actor, 'editPeople');
	await writeTransaction(app, async (tx) => {
		const row = await lockPerson(tx, personId);
		const state = stateOf(row);
		if (state !== 'invited') {
			const why = state === 'joined' ? 'has signed in already' : 'is disabled';
			throw new DomainError('wrongState', `${row.name} ${why}.`);
		}
		await tx.update(person).set({ invitedAt: app.now() }).where(eq(person.id, personId));
		await app.queue.enqueue(tx, sendInvitationJob, { personId, invitedBy: actor.name });
	});
}

/** Changes name, initials, organisation and roles. Who loses the observer role leaves their telescopes. */
export async function editPerson(
	app: App,
	actor: Actor | null,
	personId: string,
	input: PersonEdit
): Promise<void> {
	requirePermission(actor, 'editPeople');
	await writeTransaction(app, async (tx, change) => {
		await lockStewards(tx);
		const row = await lockPerson(tx, personId);
		if (row.roles.includes('steward') && !input.roles.includes('steward')) {
			await requireAnotherSteward(tx, row, 'lose the steward role', '/roles');
		}
		if (input.initials !== row.initials) {
			await requireFreeInitials(tx, input.initials, personId);
		}
		await tx.update(person).set(input).where(eq(person.id, personId));
		if (!input.roles.includes('observer')) {
			await tx.delete(telescopeObserver).where(eq(telescopeObserver.personId, personId));
		}
		change.touchNetwork();
	});
}

/** Shuts somebody out at once (their sessions end), or lets them in again. */
export async function setDisabled(
	app: App,
	actor: Actor | null,
	personId: string,
	disabled: boolean
): Promise<void> {
	requirePermission(actor, 'editPeople');
	await writeTransaction(app, async (tx, change) => {
		await lockStewards(tx);
		const row = await lockPerson(tx, personId);
		if ((row.disabledAt !== null) === disabled) return;
		if (disabled) {
			if (personId === actor.id) {
				throw new DomainError('wrongState', 'You can’t disable yourself. Ask another steward.');
			}
			if (row.roles.includes('steward')) await requireAnotherSteward(tx, row, 'be disabled');
			await tx.delete(session).where(eq(session.userId, personId));
		}
		await tx
			.update(person)
			.set({ disabledAt: disabled ? app.now() : null })
			.where(eq(person.id, personId));
		change.touchNetwork();
	});
}

function stateOf({ disabledAt, joinedAt }: PersonRow): PersonState {
	return disabledAt ? 'disabled' : joinedAt ? 'joined' : 'invited';
}

function addressInUse(known: PersonRow | null): DomainError {
	const detail = !known
		? 'Somebody with this address was invited just now.'
		: known.disabledAt
			? `${known.name} has this address and is disabled. Let them in again instead.`
			: known.joinedAt
				? `${known.name} has this address and has joined already.`
				: `${known.name} has this address and is invited already. Send the invitation again instead.`;
	return new DomainError('nameTaken', detail, [{ pointer: '/email', detail }]);
}

async function requireFreeInitials(
	tx: Transaction,
	initials: string,
	exceptId: string | null
): Promise<void> {
	const taken = and(eq(person.initials, initials), isNull(person.disabledAt));
	const [holder] = await tx
		.select({ name: person.name })
		.from(person)
		.where(exceptId ? and(taken, ne(person.id, exceptId)) : taken)
		.limit(1);
	if (!holder) return;
	const detail = `${initials} stands for ${holder.name}. Choose other initials.`;
	throw new DomainError('nameTaken', detail, [{ pointer: '/initials', detail }]);
}

async function lockPerson(tx: Transaction, personId: string): Promise<PersonRow> {
	const [row] = await tx.select().from(person).where(eq(person.id, personId)).for('update');
	if (!row) throw new DomainError('notFound', 'There is no such person.');
	return row;
}

const isSteward = sql`${'steward' satisfies Role} = any(${person.roles})`;

/** Two stewards who demote each other at once must wait for each other. */
async function lockStewards(tx: Transaction): Promise<void> {
	await tx
		.select({ id: person.id })
		.from(person)
		.where(and(isSteward, isNull(person.disabledAt)))
		.orderBy(person.id)
		.for('update');
}

async function requireAnotherSteward(
	tx: Transaction,
	row: PersonRow,
	what: string,
	pointer?: string
): Promise<void> {
	const [other] = await tx
		.select({ id: person.id })
		.from(person)
		.where(and(isSteward, isNull(person.disabledAt), ne(person.id, row.id)))
		.limit(1);
	if (other) return;
	const detail = `${row.name} is the last steward and can’t ${what}: nobody could invite people or mend anything.`;
	throw new DomainError('wrongState', detail, pointer ? [{ pointer, detail }] : []);
}
