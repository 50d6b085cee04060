const two = (value: number) => String(value).padStart(2, '0');

/** Time since T0 as a clock: `04:38`, from one hour on `3:12:07`, from 100 hours on `4d 04h`. */
export function formatClock(elapsedMs: number): string {
	const sign = elapsedMs < 0 ? '−' : '';
	const totalS = Math.floor(Math.abs(elapsedMs) / 1000);
	const hours = Math.floor(totalS / 3600);
	const minutes = Math.floor(totalS / 60) % 60;
	if (hours >= 100) return `${sign}${Math.floor(hours / 24)}d ${two(hours % 24)}h`;
	if (hours >= 1) return `${sign}${hours}:${two(minutes)}:${two(totalS % 60)}`;
	return `${sign}${two(minutes)}:${two(totalS % 60)}`;
}

/** A span in a table: `+38s`, `+31m`, `+3h12`, from 100 hours on `+4d 04h`. Whole units, rounded down. */
export function formatAfter(spanMs: number): string {
	const sign = spanMs < 0 ? '−' : '+';
	const totalS = Math.floor(Math.abs(spanMs) / 1000);
	const hours = Math.floor(totalS / 3600);
	if (totalS < 60) return `${sign}${totalS}s`;
	if (hours < 1) return `${sign}${Math.floor(totalS / 60)}m`;
	if (hours >= 100) return `${sign}${Math.floor(hours / 24)}d ${two(hours % 24)}h`;
	return `${sign}${hours}h${two(Math.floor(totalS / 60) % 60)}`;
}

/** A span in plain words: `40 s`, `12 min`, `3 h 12 min`. */
export function formatSpan(spanMs: number): string {
	const totalS = Math.max(0, Math.round(spanMs / 1000));
	if (totalS < 90) return `${totalS} s`;
	const minutes = Math.round(totalS / 60);
	if (minutes < 60) return `${minutes} min`;
	if (minutes < 48 * 60) {
		const rest = minutes % 60;
		return `${Math.floor(minutes / 60)} h${rest ? ` ${rest} min` : ''}`;
	}
	return `${Math.floor(minutes / 1440)} d ${Math.floor((minutes % 1440) / 60)} h`;
}

/** When something opens: `now`, `+32m`, `+14h50`; `never` without an instant. */
export function formatOpens(opensAt: string | null, nowMs: number): string {
	if (opensAt === null) return 'never';
	const waitMs = Date.parse(opensAt) - nowMs;
	if (waitMs < 60_000) return 'now';
	return formatAfter(waitMs);
}
