import { readFileSync } from 'node:fs';
import { resolve } from 'node:path';

/** Rows of a reference CSV file by column name; header lines that start with # name its source. */
export function readReferenceCsv(name: string): Record<string, string>[] {
	const lines = readFileSync(resolve('fixtures/reference', name), 'utf8')
		.split('\n')
		.filter((line) => line !== '' && !line.startsWith('#'));
	const columns = (lines[0] ?? '').split(',');
	return lines.slice(1).map((line) => {
		const cells = line.split(',');
		return Object.fromEntries(columns.map((column, i) => [column, cells[i] ?? '']));
	});
}

/** A reference JSON file; its `made_by` names the source. */
export function readReferenceJson<Content>(name: string): Content {
	return JSON.parse(readFileSync(resolve('fixtures/reference', name), 'utf8')) as Content;
}
