import { RAD_PER_DEG } from '../angle';
import { taiMinusUtcS } from './leapSeconds';

export const TIME_SCALES = ['UTC', 'TT', 'TDB', 'TAI', 'GPS'] as const;
export type TimeScale = (typeof TIME_SCALES)[number];

/** TT − TAI: 32.184 s by definition (IAU 1991, Recommendation IV). */
const TT_MINUS_TAI_S = 32.184;
/** TAI − GPS time: 19 s by definition (IS-GPS-200). */
const TAI_MINUS_GPS_S = 19;

const DAY_MS = 86_400_000;
/** 2000-01-01 12:00 as a clock reading, JD 2451545.0. */
const J2000_MS = Date.UTC(2000, 0, 1, 12);

/**
 * TDB − TT in seconds at a TT clock reading (milliseconds as if without leap seconds): the two largest terms,
 * 0.001658 sin g + 0.000014 sin 2g with g the Earth's mean anomaly (Astronomical Almanac, section B; from
 * memory). Within 0.05 ms of astropy from 1990 to 2050, asserted at 0.1 ms.
 */
export function tdbMinusTtS(ttMs: number): number {
	const gRad = (357.53 + (0.98560028 * (ttMs - J2000_MS)) / DAY_MS) * RAD_PER_DEG;
	return 0.001658 * Math.sin(gRad) + 0.000014 * Math.sin(2 * gRad);
}

/**
 * The TAI clock reading, in milliseconds, at which a clock of another scale shows `readingMs` (its calendar
 * date and time in milliseconds as if without leap seconds); from 1988 on, RangeError before. Exact but for
 * TDB (0.1 ms).
 */
export function taiMsOf(scale: TimeScale, readingMs: number): number {
	switch (scale) {
		case 'UTC':
			return readingMs + taiMinusUtcS(readingMs) * 1000;
		case 'TAI':
			return readingMs;
		case 'GPS':
			return readingMs + TAI_MINUS_GPS_S * 1000;
		case 'TT':
			return readingMs - TT_MINUS_TAI_S * 1000;
		case 'TDB':
			// TDB and TT differ by 2 ms at most, which changes their difference by nothing that counts.
			return readingMs - tdbMinusTtS(readingMs) * 1000 - TT_MINUS_TAI_S * 1000;
	}
}
