/** How long things may take; tests shorten them. */
export type SocketTimings = {
	/** A connection without a message of any kind for so long is taken for dead. */
	silentAfterMs: number;
	connectWithinMs: number;
	/** The first wait before connecting again; each further failure doubles it, up to the longest. */
	firstRetryMs: number;
	longestRetryMs: number;
	/** A connection that stood so long was good: the waits begin anew. */
	steadyAfterMs: number;
	/** How often settings are read and free sockets are tried for. */
	pollMs: number;
	/** The time of the last message is written no more often than this. */
	noteAliveMs: number;
};

export const SOCKET_TIMINGS: SocketTimings = {
	silentAfterMs: 90_000,
	connectWithinMs: 10_000,
	firstRetryMs: 1_000,
	longestRetryMs: 60_000,
	steadyAfterMs: 60_000,
	pollMs: 3_000,
	noteAliveMs: 20_000
};

/**
 * The wait after so many failures on end: doubling, and drawn from its upper half, so that many subscribers
 * do not come back to a broker at the same instant.
 */
export function retryDelayMs(
	failures: number,
	timings: Pick<SocketTimings, 'firstRetryMs' | 'longestRetryMs'>,
	draw: () => number = Math.random
): number {
	const fullMs = Math.min(timings.longestRetryMs, timings.firstRetryMs * 2 ** failures);
	return fullMs * (0.5 + 0.5 * draw());
}
