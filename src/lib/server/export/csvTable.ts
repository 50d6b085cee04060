import type { ExportTable } from './tableColumn';

/** A table as CSV (RFC 4180): a header line, CRLF, quotes where needed, empty where not known. */
export function csvTable<Row>({ columns, rows }: ExportTable<Row>): string {
	return csvText([
		columns.map(({ name }) => name),
		...rows.map((row) => columns.map(({ value }) => value(row) ?? ''))
	]);
}

export function csvText(lines: (string | number)[][]): string {
	return lines.map((line) => line.map(csvField).join(',') + '\r\n').join('');
}

/**
 * One field. Text that a spreadsheet would run as a formula gets an apostrophe in front (OWASP, CSV
 * injection): telescope and stream names are typed in by people.
 */
export function csvField(value: string | number): string {
	if (typeof value === 'number') return Number.isFinite(value) ? String(value) : '';
	const safe = /^[=+\-@\t\r\n]/.test(value) ? `'${value}` : value;
	return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
