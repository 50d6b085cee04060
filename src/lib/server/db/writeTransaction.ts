import { sql } from 'drizzle-orm';
import type { App } from '../app';
import { BOARD_CHANNEL, noteRevision } from './boardRevisions';
import { databaseErrorOf, type Transaction } from './database';
import { boardRevision, transient } from './schema/transients';

/** Collects what a transaction changed, so that the board's revision moves once, at its end. */
export type Change = {
	/** The transient changed: it gets the new revision. */
	touch: (transientId: string) => void;
	/** Something all transients share changed (telescopes, rota). */
	touchNetwork: () => void;
};

const RETRIED = new Set(['40001', '40P01']);
const MOST_TRIES = 4;

/**
 * Runs `body` in one transaction and moves the board's revision when it touched anything.
 * The revision row is locked last and until commit, so revisions become visible in their order:
 * a reader that has seen n has seen everything up to n.
 */
export async function writeTransaction<T>(
	app: Pick<App, 'database'>,
	body: (tx: Transaction, change: Change) => Promise<T>
): Promise<T> {
	for (let tries = 1; ; tries++) {
		try {
			let revision: number | null = null;
			const outcome = await app.database.transaction(async (tx) => {
				const touched = new Set<string>();
				let network = false;
				const result = await body(tx, {
					touch: (id) => void touched.add(id),
					touchNetwork: () => void (network = true)
				});
				if (touched.size > 0 || network) revision = await moveRevision(tx, touched, network);
				return result;
			});
			if (revision !== null) noteRevision(app.database, revision);
			return outcome;
		} catch (error) {
			const code = databaseErrorOf(error)?.code ?? '';
			if (tries >= MOST_TRIES || !RETRIED.has(code)) throw error;
		}
	}
}

/** One statement: everybody waits for the revision's row. */
async function moveRevision(
	tx: Transaction,
	touched: Set<string>,
	network: boolean
): Promise<number> {
	const ids = sql.join(
		[...touched].map((id) => sql`${id}::uuid`),
		sql`, `
	);
	const touch =
		touched.size > 0
			? sql`, touched as (
				update ${transient} set revision = (select value from moved) where id in (${ids}))`
			: sql``;
	const { rows } = await tx.execute<{ value: string }>(sql`
		with moved as (
			update ${boardRevision} set value = value + 1${network ? sql`, network = value + 1` : sql``}
			returning value)${touch}
		select value, pg_notify(${BOARD_CHANNEL}, value::text) from moved`);
	return Number(rows[0]!.value);
}
