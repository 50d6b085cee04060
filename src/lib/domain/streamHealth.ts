/** One UTC day of a stream, `2026-12-01`: what could be read, and what could not. */
export type StreamDay = { day: string; packets: number; errors: number };

/** How a stream fares; days oldest first, the last one is today. */
export type StreamHealth = {
	days: StreamDay[];
	/** Of observation packets of the last 30 days that came over the stream's own way; null without any. */
	medianLagS: number | null;
	lagPackets: number;
	/** Since it was last heard, or added; null for a retired stream. */
	quietMs: number | null;
	silentAfterMs: number;
};

/** A stream that is silent for longer than it should be. */
export type SilentStream = { code: string; name: string; lastHeardAt: string | null };

/** What every page under Network says first. */
export type NetworkNotices = {
	silent: SilentStream[];
	/** Packets in quarantine; null for those who can do nothing about it. */
	quarantined: number | null;
};
