import { eq } from 'drizzle-orm';
import type { Board, BoardTransient } from '../../domain/board';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { currentRevision } from '../db/boardRevisions';
import { boardRevision, transient } from '../db/schema/transients';
import { holdingSlots } from '../slots/slotList';
import { cachedBoard, type CachedBoard, type CachedTransient, type KnownParts } from './boardCache';
import { boardNetwork } from './boardNetwork';
import { boardTransients } from './boardRows';

/**
 * What the Now and Duty screens show, the same for everybody who may see it. With `since`, only the
 * transients changed after that revision; `openDesignations` always names all, costliest wait first.
 */
export async function boardFor(app: App, actor: Actor | null, since = 0): Promise<Board> {
	requirePermission(actor, 'viewBoard');
	const { shared, transients } = await currentBoard(app);
	return {
		serverNow: app.now().toISOString(),
		...shared,
		transients: transients.filter(changedAfter(since, shared.revision)).map(({ item }) => item)
	};
}

/** The same as JSON text: the parts that many people ask for are written once. */
export async function boardTextFor(
	app: App,
	actor: Actor | null,
	since = 0
): Promise<{ revision: number; text: string }> {
	requirePermission(actor, 'viewBoard');
	const { shared, sharedText, transients } = await currentBoard(app);
	const chosen = transients.filter(changedAfter(since, shared.revision));
	const serverNow = JSON.stringify(app.now().toISOString());
	const texts = chosen.map(({ text }) => text).join(',');
	return {
		revision: shared.revision,
		text: `{"serverNow":${serverNow},${sharedText.slice(1, -1)},"transients":[${texts}]}`
	};
}

/** Nothing to go by (0, or a revision of another database) means everything. */
function changedAfter(since: number, revision: number): (item: CachedTransient) => boolean {
	return ({ item }) => since <= 0 || since > revision || item.revision > since;
}

async function currentBoard(app: App): Promise<CachedBoard> {
	return cachedBoard(app, await currentRevision(app), makeBoard);
}

async function makeBoard(app: App, known: KnownParts): Promise<CachedBoard> {
	const now = app.now();
	const minute = Math.floor(now.getTime() / 60_000);
	// One snapshot: the revision and what it stands for must not come from two moments.
	return app.database.transaction(
		async (tx) => {
			const [row] = await tx.select().from(boardRevision);
			const { value: revision, network } = row!;
			const open = await tx.select().from(transient).where(eq(transient.state, 'open'));
			const common =
				known.network({ network, minute }) ?? (await boardNetwork(app, tx, { network, minute }));
			const kept = open.flatMap(({ id, revision }) => known.transient(id, revision, network) ?? []);
			const missing = open.filter(({ id }) => !kept.some((item) => item.id === id));
			const made = await boardTransients(tx, missing, common.names);
			const transients = [
				...kept,
				...made.map((item, index) => ({
					id: missing[index]!.id,
					network,
					item,
					text: JSON.stringify(item)
				}))
			].sort((a, b) => byCostOfWaiting(a.item, b.item));
			const holds = await holdingSlots(tx, now);
			const shared = {
				revision,
				openDesignations: transients.map(({ item }) => item.designation),
				telescopes: common.telescopes.map((item) => ({
					...item,
					holds: holds.filter((hold) => hold.telescopeCode === item.code)
				})),
				watch: common.watch
			};
			return { shared, sharedText: JSON.stringify(shared), transients, common };
		},
		{ isolationLevel: 'repeatable read', accessMode: 'read only' }
	);
}

/** Costliest wait first; those nobody has decided on come before parked and dropped ones at equal cost. */
export function byCostOfWaiting(a: BoardTransient, b: BoardTransient): number {
	const cost = (item: BoardTransient) => item.outlook?.costOfWaitingPoints ?? -1;
	const dropped = (item: BoardTransient) => Number(item.decision?.decision === 'drop');
	return (
		dropped(a) - dropped(b) ||
		Number(a.isTest) - Number(b.isTest) ||
		cost(b) - cost(a) ||
		b.t0.localeCompare(a.t0)
	);
}
