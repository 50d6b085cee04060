/**
 * TAI − UTC in whole seconds from each UTC date on. Source: IERS Bulletin C and the table tai-utc.dat of the
 * US Naval Observatory, as in ERFA 2.0.0.1 (`erfa.leap_seconds`). Last entry: 2017-01-01, 37 s; a later leap
 * second must be added here.
 */
const LEAP_SECONDS: readonly { fromUtcMs: number; taiMinusUtcS: number }[] = (
	[
		['1988-01-01', 24],
		['1990-01-01', 25],
		['1991-01-01', 26],
		['1992-07-01', 27],
		['1993-07-01', 28],
		['1994-07-01', 29],
		['1996-01-01', 30],
		['1997-07-01', 31],
		['1999-01-01', 32],
		['2006-01-01', 33],
		['2009-01-01', 34],
		['2012-07-01', 35],
		['2015-07-01', 36],
		['2017-01-01', 37]
	] as const
).map(([day, taiMinusUtcS]) => ({ fromUtcMs: Date.parse(`${day}T00:00:00Z`), taiMinusUtcS }));

const newestFirst = LEAP_SECONDS.toReversed();

/** TAI − UTC in seconds at a UTC instant from 1988 on; RangeError before. */
export function taiMinusUtcS(utcMs: number): number {
	const entry = newestFirst.find(({ fromUtcMs }) => utcMs >= fromUtcMs);
	if (!entry) throw new RangeError(`utcMs is ${utcMs}; leap seconds are known from 1988 on`);
	return entry.taiMinusUtcS;
}

/**
 * The UTC instant of a TAI clock reading (milliseconds counted as if TAI had UTC's calendar and no leap
 * seconds), from 1988 on; RangeError before. A reading inside an inserted second gives the second after it.
 */
export function utcMsOfTai(taiMs: number): number {
	for (const { fromUtcMs, taiMinusUtcS: offsetS } of newestFirst) {
		const utcMs = taiMs - offsetS * 1000;
		if (utcMs >= fromUtcMs) return utcMs;
	}
	throw new RangeError(`taiMs is ${taiMs}; leap seconds are known from 1988 on`);
}

/** Whether a leap second was inserted right before this UTC midnight. */
export function followsLeapSecond(utcMidnightMs: number): boolean {
	return LEAP_SECONDS.slice(1).some(({ fromUtcMs }) => fromUtcMs === utcMidnightMs);
}
