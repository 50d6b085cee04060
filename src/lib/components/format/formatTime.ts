/** What a time on screen shows; all but `date` end in UTC. */
export type TimeForm = 'second' | 'minute' | 'date' | 'full' | 'short';

const two = (value: number) => String(value).padStart(2, '0');

/** An instant in words of UTC: `03:41:27 UTC`, `03:41 UTC`, `1 Dec 2026`, `2026-12-01 03:41:27 UTC`, `03:41`. */
export function formatUtc(at: string | number | Date, form: TimeForm = 'second'): string {
	const date = new Date(at);
	if (Number.isNaN(date.getTime())) return 'unknown time';
	const minute = `${two(date.getUTCHours())}:${two(date.getUTCMinutes())}`;
	const second = `${minute}:${two(date.getUTCSeconds())}`;
	switch (form) {
		case 'short':
			return minute;
		case 'minute':
			return `${minute} UTC`;
		case 'second':
			return `${second} UTC`;
		case 'date':
			return `${date.getUTCDate()} ${MONTHS[date.getUTCMonth()]} ${date.getUTCFullYear()}`;
		case 'full':
			return `${date.getUTCFullYear()}-${two(date.getUTCMonth() + 1)}-${two(date.getUTCDate())} ${second} UTC`;
	}
}

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

/** The same instant on the viewer's own clock, with the day and the zone's name. */
export function formatLocal(at: string | number | Date): string {
	const date = new Date(at);
	if (Number.isNaN(date.getTime())) return 'unknown time';
	return new Intl.DateTimeFormat('en-GB', {
		weekday: 'short',
		day: 'numeric',
		month: 'short',
		hour: '2-digit',
		minute: '2-digit',
		second: '2-digit',
		timeZoneName: 'short'
	}).format(date);
}
