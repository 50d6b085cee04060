const FORM =
	/^(\d{4}-\d{2}-\d{2})(?:T|\s+)(\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?)\s*(z|utc?|[+-]\d{2}(?::?\d{2})?)?$/i;

/**
 * A UTC instant as people write it (`2026-12-01 03:41:27`, ISO 8601 with or without a zone), as ISO 8601 with its
 * zone; null when it can't be read. Whether there is such a day is left to who checks it.
 */
export function isoFromUtcText(text: string): string | null {
	const [, day, time, zone = 'Z'] = FORM.exec(text.trim()) ?? [];
	if (!day || !time) return null;
	const offset = /^[+-]\d{2}$/.test(zone)
		? `${zone}:00`
		: zone.replace(/^([+-]\d{2})(\d{2})$/, '$1:$2');
	return `${day}T${time}${/^(z|utc?)$/i.test(zone) ? 'Z' : offset}`;
}
