import pg from 'pg';
import type { App } from '../app';
import { logger } from '../logger';
import type { Database } from './database';
import { boardRevision } from './schema/transients';

/** Channel on which web processes hear that the board changed; the payload is the new revision. */
export const BOARD_CHANNEL = 'duskline_board';

const RECONNECT_MS = 2_000;

/** What each database's listener has heard last; null while it has no contact. */
const heard = new WeakMap<Database, { revision: number | null }>();

/**
 * The number of the last change to anything the board shows: from memory while PostgreSQL's
 * notifications arrive, else asked for.
 */
export async function currentRevision(app: Pick<App, 'database'>): Promise<number> {
	const known = heard.get(app.database)?.revision;
	return known ?? readRevision(app.database);
}

async function readRevision(database: Database): Promise<number> {
	const [row] = await database.select({ value: boardRevision.value }).from(boardRevision);
	return row!.value;
}

/** Tells this process of a revision it made itself, so that its next answer includes it. */
export function noteRevision(database: Database, revision: number): void {
	const state = heard.get(database);
	if (state && state.revision !== null) state.revision = Math.max(state.revision, revision);
}

/** Listens for revisions until the returned function is called; connects again when the wire is cut. */
export async function followRevisions(app: App): Promise<() => Promise<void>> {
	const state: { revision: number | null } = { revision: null };
	heard.set(app.database, state);
	let stopped = false;
	let client: pg.Client | undefined;
	let timer: NodeJS.Timeout | undefined;

	const connect = async (): Promise<void> => {
		const next = new pg.Client({ connectionString: app.config.databaseUrl });
		next.on('notification', ({ payload }) => {
			const revision = Number(payload);
			if (state.revision !== null) state.revision = Math.max(state.revision, revision);
		});
		const lost = (error?: Error) => {
			if (client !== next) return;
			client = undefined;
			state.revision = null;
			if (stopped) return;
			logger.warn({ error: error?.message }, 'board listener lost; connecting again');
			timer = setTimeout(() => void connect(), RECONNECT_MS);
		};
		next.on('error', lost);
		next.on('end', () => lost());
		client = next;
		try {
			await next.connect();
			await next.query(`listen ${BOARD_CHANNEL}`);
			// Read after LISTEN: nothing that commits from here on goes unheard.
			const revision = await readRevision(app.database);
			if (client === next) state.revision = revision;
		} catch (error) {
			await next.end().catch(() => undefined);
			lost(error as Error);
		}
	};
	await connect();
	return async () => {
		stopped = true;
		clearTimeout(timer);
		heard.delete(app.database);
		await client?.end();
	};
}
