import type { Board, BoardTransient } from '../../domain/board';
import type { App } from '../app';
import type { Database } from '../db/database';
import type { BoardNetwork } from './boardNetwork';

/** One transient as the board shows it, with its JSON; good for one revision of it and of the network. */
export type CachedTransient = { id: string; network: number; item: BoardTransient; text: string };

export type CachedBoard = {
	shared: Omit<Board, 'serverNow' | 'transients'>;
	sharedText: string;
	transients: CachedTransient[];
	common: BoardNetwork;
};

/** What the last board knew that still holds. */
export type KnownParts = {
	transient: (id: string, revision: number, network: number) => CachedTransient | undefined;
	network: (at: Pick<BoardNetwork, 'network' | 'minute'>) => BoardNetwork | undefined;
};

type MakeBoard = (app: App, known: KnownParts) => Promise<CachedBoard>;

type Entry = { revision: number; minute: number; made: Promise<CachedBoard> };

/** Per process and database: the newest board, and the one before it while that is being made. */
const cache = new WeakMap<Database, Entry>();
const lastMade = new WeakMap<Database, CachedBoard>();

/**
 * The board at `revision`. It is made anew when the revision or the minute changes, but of its transients
 * only those that changed: one alert must not cost the reading of all the others.
 */
export function cachedBoard(app: App, revision: number, make: MakeBoard): Promise<CachedBoard> {
	const minute = Math.floor(app.now().getTime() / 60_000);
	const present = cache.get(app.database);
	if (present?.revision === revision && present.minute === minute) return present.made;
	const made = make(app, knownParts(lastMade.get(app.database)));
	const entry = { revision, minute, made };
	cache.set(app.database, entry);
	made.then(
		(board) => {
			// Builds may end out of order; the newer one is the better start.
			const last = lastMade.get(app.database);
			if (!last || last.shared.revision <= board.shared.revision) {
				lastMade.set(app.database, board);
			}
		},
		() => {
			if (cache.get(app.database) === entry) cache.delete(app.database);
		}
	);
	return made;
}

function knownParts(last: CachedBoard | undefined): KnownParts {
	const byId = new Map((last?.transients ?? []).map((item) => [item.id, item]));
	return {
		transient: (id, revision, network) => {
			const found = byId.get(id);
			return found?.item.revision === revision && found.network === network ? found : undefined;
		},
		network: ({ network, minute }) => {
			const found = last?.common;
			return found?.network === network && found.minute === minute ? found : undefined;
		}
	};
}
