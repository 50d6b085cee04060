import { and, asc, eq, gt, inArray, notInArray, sql, type SQL } from 'drizzle-orm';
import type { BoardSlot } from '../../domain/board';
import { requirePermission, type Actor } from '../actor';
import { HOLDING_SLOT_STATES } from '../../domain/vocabulary';
import type { App } from '../app';
import type { Executor } from '../db/database';
import { telescope } from '../db/schema/network';
import { person } from '../db/schema/people';
import { slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { boardSlot } from '../transients/boardRows';

export type ListedSlot = BoardSlot & {
	designation: string;
	t0: string;
	telescopeName: string;
	/** `rotationDeg` turns the whole field, north through east; 0 except near a pole. */
	tiles: { raDeg: number; decDeg: number; rotationDeg: number; startAt: string }[];
};

/** Slots that hold a telescope now or later, with the transient each is for. */
export async function holdingSlots(
	executor: Executor,
	now: Date
): Promise<(BoardSlot & { designation: string })[]> {
	const rows = await slotRows(
		executor,
		and(inArray(slot.state, [...HOLDING_SLOT_STATES]), endsAfter(now))
	);
	return rows.map((row) => ({ ...boardSlotOf(row), designation: row.designation }));
}

/** Slots from a day ago onwards, by start; released and lapsed ones left out. */
export async function listSlots(app: App, actor: Actor | null): Promise<ListedSlot[]> {
	requirePermission(actor, 'viewSlots');
	const since = new Date(app.now().getTime() - 24 * 3_600_000);
	const rows = await slotRows(
		app.database,
		and(notInArray(slot.state, ['released', 'lapsed']), endsAfter(since))
	);
	return rows.map((row) => ({
		...boardSlotOf(row),
		designation: row.designation,
		t0: row.t0.toISOString(),
		telescopeName: row.telescope.name,
		tiles: row.slot.tiles.map((tile) => ({
			raDeg: tile.centre.raDeg,
			decDeg: tile.centre.decDeg,
			rotationDeg: tile.rotationDeg,
			startAt: new Date(tile.startMs).toISOString()
		}))
	}));
}

const endsAfter = (at: Date) => gt(sql`upper(${slot.during})`, at.toISOString());

function slotRows(executor: Executor, where: SQL | undefined) {
	return executor
		.select({ slot, person, telescope, designation: transient.designation, t0: transient.t0 })
		.from(slot)
		.innerJoin(telescope, eq(telescope.id, slot.telescopeId))
		.innerJoin(transient, eq(transient.id, slot.transientId))
		.leftJoin(person, eq(person.id, slot.claimedBy))
		.where(where)
		.orderBy(asc(slot.during));
}

function boardSlotOf(row: Awaited<ReturnType<typeof slotRows>>[number]): BoardSlot {
	return boardSlot(
		row.slot,
		() => row.person ?? undefined,
		() => row.telescope
	);
}
