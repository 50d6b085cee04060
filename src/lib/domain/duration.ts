/** A time since T0 as `+4m 50s`, `+3h12` or `+2d 04h`; negative ones carry a minus sign. */
export function sinceT0(elapsedMs: number): string {
	const sign = elapsedMs < 0 ? '−' : '+';
	const seconds = Math.floor(Math.abs(elapsedMs) / 1000);
	const minutes = Math.floor(seconds / 60);
	const hours = Math.floor(minutes / 60);
	const two = (value: number) => String(value).padStart(2, '0');
	if (hours >= 48) return `${sign}${Math.floor(hours / 24)}d ${two(hours % 24)}h`;
	if (hours >= 1) return `${sign}${hours}h${two(minutes % 60)}`;
	if (minutes >= 1) return `${sign}${minutes}m ${two(seconds % 60)}s`;
	return `${sign}${seconds}s`;
}
