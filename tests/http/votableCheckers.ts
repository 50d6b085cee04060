import { execFileSync, spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const SCHEMA = process.env.DUSKLINE_VOTABLE_XSD ?? '../shared/standards/VOTable.xsd';
/** Debian's own: its packages are not seen by another Python in the path. */
const PYTHON = '/usr/bin/python3';

const runs = (command: string, args: string[]) => spawnSync(command, args).status === 0;

/** Says aloud what can't be checked here, and why. */
function missing(what: string): null {
	console.warn(`NOT CHECKED: ${what}`);
	return null;
}

function withFile<T>(text: string, use: (path: string) => T): T {
	const directory = mkdtempSync(join(tmpdir(), 'duskline-votable-'));
	try {
		const path = join(directory, 'table.vot');
		writeFileSync(path, text);
		return use(path);
	} finally {
		rmSync(directory, { recursive: true });
	}
}

/** What xmllint finds wrong by the IVOA's schema; empty when valid, null when it can't be asked. */
export function votableFaults(text: string): string | null {
	if (!existsSync(SCHEMA)) return missing(`VOTable by its schema: ${SCHEMA} is not there`);
	if (!runs('xmllint', ['--version'])) return missing('VOTable by its schema: no xmllint');
	return withFile(text, (path) => {
		const { status, stderr } = spawnSync('xmllint', [
			'--noout',
			'--nonet',
			'--schema',
			SCHEMA,
			path
		]);
		return status === 0 ? '' : stderr.toString();
	});
}

export type ReadTable = {
	names: string[];
	units: (string | null)[];
	ucds: (string | null)[];
	frames: string[];
	rows: (string | number | null)[][];
};

const SCRIPT = `
import json, sys, warnings
from astropy.io.votable import parse
from astropy.io.votable.exceptions import W06
warnings.simplefilter('error')
# Its list of UCD words is older than ObsLocTAP's pos.outline.
warnings.simplefilter('ignore', W06)
votable = parse(sys.argv[1], verify='warn')
table = votable.get_first_table()
data = table.to_table(use_names_over_ids=True)
def plain(value):
    if getattr(value, 'mask', False) is True or str(value) == '--': return None
    return value.item() if hasattr(value, 'item') else str(value)
json.dump({
    'names': [f.name for f in table.fields],
    'units': [None if f.unit is None else str(f.unit) for f in table.fields],
    'ucds': [f.ucd for f in table.fields],
    'frames': [c.system for c in votable.resources[0].coordinate_systems] + [t.timescale for t in votable.resources[0].time_systems],
    'rows': [[plain(v) for v in row] for row in data],
}, sys.stdout)
`;

/** The table as astropy reads it with every warning an error; null when astropy is not installed. */
export function readByAstropy(text: string): ReadTable | null {
	if (!existsSync(PYTHON) || !runs(PYTHON, ['-c', 'import astropy.io.votable'])) {
		return missing('VOTable by astropy: python3-astropy is not installed');
	}
	return withFile(
		text,
		(path) =>
			JSON.parse(execFileSync(PYTHON, ['-c', SCRIPT, path], { encoding: 'utf8' })) as ReadTable
	);
}
