import { and, asc, eq, gt, sql } from 'drizzle-orm';
import type { BoardSlot } from '../../domain/board';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { telescope } from '../db/schema/network';
import { person } from '../db/schema/people';
import { slot } from '../db/schema/slots';
import { transient } from '../db/schema/transients';
import { boardSlot } from '../transients/boardRows';

export type ListedSlot = BoardSlot & {
	designation: string;
	t0: string;
	telescopeName: string;
	tiles: { raDeg: number; decDeg: number; startAt: string }[];
};

/** Slots from a day ago onwards, by start; released and lapsed ones left out. */
export async function listSlots(app: App, actor: Actor | null): Promise<ListedSlot[]> {
	requirePermission(actor, 'viewSlots');
	const since = new Date(app.now().getTime() - 24 * 3_600_000);
	const rows = await app.database
		.select({ slot, person, telescope, designation: transient.designation, t0: transient.t0 })
		.from(slot)
		.innerJoin(telescope, eq(telescope.id, slot.telescopeId))
		.innerJoin(transient, eq(transient.id, slot.transientId))
		.leftJoin(person, eq(person.id, slot.claimedBy))
		.where(
			and(
				sql`${slot.state} not in ('released', 'lapsed')`,
				gt(sql`upper(${slot.during})`, since.toISOString())
			)
		)
		.orderBy(asc(slot.during));
	return rows.map((row) => ({
		...boardSlot(
			row.slot,
			() => row.person ?? undefined,
			() => row.telescope
		),
		designation: row.designation,
		t0: row.t0.toISOString(),
		telescopeName: row.telescope.name,
		tiles: row.slot.tiles.map((tile) => ({
			raDeg: tile.centre.raDeg,
			decDeg: tile.centre.decDeg,
			startAt: new Date(tile.startMs).toISOString()
		}))
	}));
}
