import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { schemaFaults, whyNoSchemaCheck } from '../../../../tests/unit/xmllint';

const missing = whyNoSchemaCheck();
if (missing !== null) console.warn(`SKIPPED: VOEvents against their schema, as ${missing}`);

const folder = 'fixtures/packets';
const names = readdirSync(folder).filter((name) => name.endsWith('.xml'));

describe.skipIf(missing !== null)(
	'VOEvent fixtures against the schema of VOEvent 2.0 (xmllint)',
	() => {
		it.each(names)('%s is valid', (name) => {
			expect(schemaFaults(readFileSync(`${folder}/${name}`))).toBe('');
		});

		it('notices what the schema does not allow', () => {
			const text = readFileSync(`${folder}/voeventReport.xml`, 'utf8');
			expect(schemaFaults(text.replace('role="observation"', 'role="real"'))).toContain('role');
		});
	}
);
