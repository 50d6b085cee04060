import { and, eq, isNull, sql } from 'drizzle-orm';
import type { BoardWatch, PersonRef } from '../../domain/board';
import { gapsIn, type WatchInput } from '../../domain/watch';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { databaseErrorOf, type Transaction } from '../db/database';
import type { TimeRange } from '../db/columns';
import { watch } from '../db/schema/network';
import { person } from '../db/schema/people';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { overlappingWatch, watchesBetween } from './rotaStore';

const HOUR_MS = 3_600_000;
/** How far ahead `next` is looked for. */
const NEXT_WITHIN_H = 48;

/** Who is on watch at this moment and who is next; null when nobody is. */
export async function currentWatch(app: Pick<App, 'database' | 'now'>): Promise<BoardWatch | null> {
	const now = app.now();
	const watches = await watchesBetween(app.database, now, new Date(+now + NEXT_WITHIN_H * HOUR_MS));
	const current = watches.find(({ during }) => during.start <= now && now < during.end);
	if (!current) return null;
	const next = watches.find(({ during }) => during.start >= current.during.end);
	return {
		first: current.first,
		second: current.second,
		startAt: current.during.start.toISOString(),
		endAt: current.during.end.toISOString(),
		next: next?.first ?? null
	};
}

export type RotaEntry =
	| {
			kind: 'watch';
			id: string;
			startAt: string;
			endAt: string;
			first: PersonRef;
			second: PersonRef | null;
			firstServes: boolean;
	  }
	| { kind: 'gap'; startAt: string; endAt: string };

export type Rota = {
	entries: RotaEntry[];
	/** Duty scientists who can be put on watch. */
	candidates: PersonRef[];
};

/** The watches from now on with the gaps between them, and who can be put on one. */
export async function rotaAhead(app: App, actor: Actor | null, days: number): Promise<Rota> {
	requirePermission(actor, 'viewNetwork');
	const startMs = +app.now();
	const endMs = startMs + days * 24 * HOUR_MS;
	const watches = await watchesBetween(app.database, new Date(startMs), new Date(endMs));
	const covered = watches.map(({ during }) => ({ startMs: +during.start, endMs: +during.end }));
	const entries: RotaEntry[] = [
		...watches.map(({ id, during, first, second, firstServes }) => ({
			kind: 'watch' as const,
			id,
			startAt: during.start.toISOString(),
			endAt: during.end.toISOString(),
			first,
			second,
			firstServes
		})),
		...gapsIn({ startMs, endMs }, covered).map((gap) => ({
			kind: 'gap' as const,
			startAt: new Date(gap.startMs).toISOString(),
			endAt: new Date(gap.endMs).toISOString()
		}))
	].sort((a, b) => a.startAt.localeCompare(b.startAt));
	const candidates = await app.database
		.select({ id: person.id, name: person.name, initials: person.initials })
		.from(person)
		.where(and(sql`'duty' = any(${person.roles})`, isNull(person.disabledAt)))
		.orderBy(person.name);
	return { entries, candidates };
}

/** Adds a watch, or changes the one whose id is given. */
export async function saveWatch(
	app: App,
	actor: Actor | null,
	input: WatchInput
): Promise<{ id: string }> {
	requirePermission(actor, 'editRota');
	const during: TimeRange = { start: new Date(input.startAt), end: new Date(input.endAt) };
	const values = {
		during,
		firstPersonId: input.firstPersonId,
		secondPersonId: input.secondPersonId
	};
	try {
		return await writeTransaction(app, async (tx, change) => {
			await requireDuty(tx, 'firstPersonId', input.firstPersonId);
			if (input.secondPersonId) await requireDuty(tx, 'secondPersonId', input.secondPersonId);
			const clash = await overlappingWatch(tx, during, input.id ?? null);
			if (clash) throw overlapRefusal(clash);
			const rows = input.id
				? await tx
						.update(watch)
						.set(values)
						.where(eq(watch.id, input.id))
						.returning({ id: watch.id })
				: await tx.insert(watch).values(values).returning({ id: watch.id });
			const [row] = rows;
			if (!row) throw new DomainError('notFound', 'This watch has been removed.');
			change.touchNetwork();
			return row;
		});
	} catch (error) {
		if (databaseErrorOf(error)?.constraint !== 'watch_no_overlap') throw error;
		// Somebody entered an overlapping watch at the same moment.
		const clash = await overlappingWatch(app.database, during, input.id ?? null);
		throw overlapRefusal(clash);
	}
}

/** Removes a watch from the rota. */
export async function removeWatch(
	app: App,
	actor: Actor | null,
	input: { id: string }
): Promise<void> {
	requirePermission(actor, 'editRota');
	await writeTransaction(app, async (tx, change) => {
		const removed = await tx
			.delete(watch)
			.where(eq(watch.id, input.id))
			.returning({ id: watch.id });
		if (removed.length === 0) throw new DomainError('notFound', 'This watch has been removed.');
		change.touchNetwork();
	});
}

async function requireDuty(tx: Transaction, field: string, personId: string): Promise<void> {
	const [found] = await tx.select().from(person).where(eq(person.id, personId));
	if (!found || found.disabledAt || !found.roles.includes('duty')) {
		const detail = found ? `${found.name} is not a duty scientist.` : 'There is no such person.';
		throw new DomainError('invalid', detail, [{ pointer: `/${field}`, detail }]);
	}
}

function overlapRefusal(clash: { during: TimeRange; name: string } | null): DomainError {
	const detail = clash
		? `It overlaps ${clash.name}’s watch from ${utcText(clash.during.start)} to ${utcText(clash.during.end)}.`
		: 'It overlaps another watch.';
	return new DomainError('invalid', detail, [{ pointer: '/startAt', detail }]);
}

function utcText(at: Date): string {
	return `${at.toISOString().slice(0, 16).replace('T', ' ')} UTC`;
}
