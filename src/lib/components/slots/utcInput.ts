/** An instant for a `datetime-local` box that means UTC: `2026-12-01T04:12`. */
export function toUtcInput(utcMs: number): string {
	return new Date(utcMs).toISOString().slice(0, 16);
}

/** The instant such a box means, UTC milliseconds; NaN for an empty or broken one. */
export function fromUtcInput(text: string): number {
	return Date.parse(`${text.length === 16 ? `${text}:00` : text}Z`);
}
