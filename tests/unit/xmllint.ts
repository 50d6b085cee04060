import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

/** The schema of VOEvent 2.0, where the workspace keeps standards; it is not part of the project. */
const SCHEMA = process.env.DUSKLINE_VOEVENT_XSD ?? '../shared/standards/VOEvent-v2.0.xsd';

/** Why documents can't be checked against the schema here; null when they can. */
export function whyNoSchemaCheck(): string | null {
	if (!existsSync(SCHEMA)) return `there is no ${SCHEMA}`;
	if (spawnSync('xmllint', ['--version']).error) {
		return 'xmllint is not installed (Debian package libxml2-utils)';
	}
	return null;
}

/** What xmllint says against a document; empty when the schema allows it. */
export function schemaFaults(document: string | Buffer): string {
	const run = spawnSync('xmllint', ['--nonet', '--noout', '--schema', SCHEMA, '-'], {
		input: document,
		encoding: 'utf8'
	});
	return run.status === 0 ? '' : run.stderr || `xmllint ended with ${run.status}`;
}
