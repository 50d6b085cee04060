import { queryOptions, type QueryClient } from '@tanstack/svelte-query';
import type { Board } from '../domain/board';
import { mergeBoard } from './mergeBoard';
import { queryKeys } from './queryKeys';
import { request } from './request';
import { serverClock } from './serverClock.svelte';

export const VISIBLE_POLL_MS = 2_000;
export const HIDDEN_POLL_MS = 20_000;
/** The header's own pace on pages that show no board. */
export const BACKGROUND_POLL_MS = 60_000;

/** The validator of the answer that brought the board to `revision`. */
let validator: { revision: number; etag: string } | null = null;

/**
 * Asks for what changed since `held`. A 304 returns `held` itself, so that nothing is drawn anew;
 * a gap in the answer asks once more for the whole board.
 */
export async function fetchBoard(
	held: Board | undefined,
	signal?: AbortSignal,
	send?: typeof fetch
): Promise<Board> {
	const headers: Record<string, string> = { accept: 'application/json' };
	if (held && validator?.revision === held.revision) headers['if-none-match'] = validator.etag;
	const path = held ? `/api/v1/board?since=${held.revision}` : '/api/v1/board';
	const response = await request(path, { headers, signal, send });
	if (held && response.status === 304) return held;
	const answer = (await response.json()) as Board;
	serverClock.sync(answer.serverNow);
	const board = held ? mergeBoard(held, answer) : answer;
	if (!board) return fetchBoard(undefined, signal, send);
	const etag = response.headers.get('etag');
	validator = etag ? { revision: board.revision, etag } : null;
	return board;
}

/** The board, polled: every 2 s while the page is in view, every 20 s while it is not. */
export function boardQuery(
	client: QueryClient,
	{ initialData, pollMs = VISIBLE_POLL_MS }: { initialData?: Board; pollMs?: number } = {}
) {
	return queryOptions({
		queryKey: queryKeys.board,
		queryFn: ({ signal }) => fetchBoard(client.getQueryData<Board>(queryKeys.board), signal),
		initialData,
		refetchInterval: () =>
			typeof document !== 'undefined' && document.hidden
				? Math.max(HIDDEN_POLL_MS, pollMs)
				: pollMs,
		refetchIntervalInBackground: true,
		refetchOnWindowFocus: true,
		staleTime: 0
	});
}

/** Takes over a board that a page's load brought, unless a newer one is held. */
export function offerBoard(client: QueryClient, board: Board): void {
	client.setQueryData<Board>(queryKeys.board, (held) =>
		held && held.revision >= board.revision ? held : board
	);
}

/** Asks for the board at once, after a change of one's own. */
export function refreshBoard(client: QueryClient): Promise<void> {
	return client.invalidateQueries({ queryKey: queryKeys.board });
}
