import type { ExportTable, TableColumn } from './tableColumn';

/** ID of the element that says what a column's numbers are counted in. */
const FRAME_IDS = { icrs: 'icrs', mjd: 'utc_mjd', iso: 'utc' } as const;

/**
 * A table as VOTable 1.4 in TABLEDATA (IVOA recommendation of 2019-10-21): positions refer to a COOSYS of ICRS, times to
 * a TIMESYS of UTC at the telescope, an empty TD is a value that is not known. 1.4 says all that is said here, and
 * more readers know it than 1.5.
 */
export function voTable<Row>({
	name,
	description,
	facts,
	columns,
	rows
}: ExportTable<Row>): string {
	const info = facts.map((fact) => `<INFO name="${xml(fact.name)}" value="${xml(fact.value)}"/>`);
	const data = rows.map(
		(row) => `<TR>${columns.map(({ value }) => `<TD>${cell(value(row))}</TD>`).join('')}</TR>`
	);
	return [
		'<?xml version="1.0" encoding="UTF-8"?>',
		'<VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3">',
		'<RESOURCE type="results">',
		`<DESCRIPTION>${xml(description)}</DESCRIPTION>`,
		'<INFO name="QUERY_STATUS" value="OK"/>',
		...info,
		`<COOSYS ID="${FRAME_IDS.icrs}" system="ICRS"/>`,
		`<TIMESYS ID="${FRAME_IDS.mjd}" timeorigin="MJD-origin" timescale="UTC" refposition="TOPOCENTER"/>`,
		`<TIMESYS ID="${FRAME_IDS.iso}" timescale="UTC" refposition="TOPOCENTER"/>`,
		`<TABLE name="${xml(name)}" nrows="${rows.length}">`,
		...columns.map((column) => field(column, rows)),
		'<DATA><TABLEDATA>',
		...data,
		'</TABLEDATA></DATA>',
		'</TABLE>',
		'</RESOURCE>',
		'</VOTABLE>',
		''
	].join('\n');
}

function field<Row>(column: TableColumn<Row>, rows: Row[]): string {
	// A char is ASCII in VOTable 1.4 (section 2.1); names are typed in by people.
	const isAscii = rows.every((row) => !/[^\t\n\r\u0020-\u007e]/.test(cell(column.value(row))));
	const attributes = {
		name: column.name,
		datatype: isAscii ? column.datatype : 'unicodeChar',
		arraysize: column.datatype === 'char' ? '*' : undefined,
		unit: column.unit,
		ucd: column.ucd,
		xtype: column.frame === 'iso' ? 'timestamp' : undefined,
		ref: column.frame && FRAME_IDS[column.frame]
	};
	const written = Object.entries(attributes).flatMap(([key, value]) =>
		value === undefined ? [] : [` ${key}="${xml(value)}"`]
	);
	return `<FIELD${written.join('')}><DESCRIPTION>${xml(column.description)}</DESCRIPTION></FIELD>`;
}

function cell(value: string | number | null): string {
	if (value === null || (typeof value === 'number' && !Number.isFinite(value))) return '';
	return xml(String(value));
}

const ENTITIES: Record<string, string> = {
	'&': '&amp;',
	'<': '&lt;',
	'>': '&gt;',
	'"': '&quot;',
	'\n': '&#10;',
	'\r': '&#13;',
	'\t': '&#9;'
};

/**
 * Text for an element or an attribute. What XML 1.0 can't hold (section 2.2) becomes a replacement character.
 */
function xml(text: string): string {
	return text
		.replace(/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, '\ufffd')
		.replace(/[&<>"\n\r\t]/g, (character) => ENTITIES[character] ?? character);
}
