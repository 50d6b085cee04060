/** What a box for an instant takes; the browser's own picker would show local customs, as a.m. and p.m. */
export const UTC_INPUT = {
	type: 'text',
	inputmode: 'numeric',
	pattern: '\\d{4}-\\d{2}-\\d{2} \\d{2}:\\d{2}',
	placeholder: '2026-12-01 04:12',
	title: 'Year-month-day hour:minute, as 2026-12-01 04:12, in UTC',
	autocomplete: 'off',
	mono: true
} as const;

const FORM = /^(\d{4})-(\d{2})-(\d{2})[ T](\d{2}):(\d{2})$/;

/** An instant as such a box shows it: `2026-12-01 04:12`, UTC. */
export function toUtcInput(utcMs: number): string {
	return new Date(utcMs).toISOString().slice(0, 16).replace('T', ' ');
}

/** The instant such a box means, UTC milliseconds; NaN for an empty one or a date that does not exist. */
export function fromUtcInput(text: string): number {
	const trimmed = text.trim();
	if (!FORM.test(trimmed)) return NaN;
	const utcMs = Date.parse(`${trimmed.replace(' ', 'T')}:00Z`);
	// Some engines roll 31 June over to 1 July.
	return Number.isFinite(utcMs) && toUtcInput(utcMs) === trimmed.replace('T', ' ') ? utcMs : NaN;
}
