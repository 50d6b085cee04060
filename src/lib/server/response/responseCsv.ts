import { RESPONSE_STEP_LABELS, type ResponseTables } from '../../domain/response';
import { csvText } from '../export/csvTable';

/** The table as CSV (RFC 4180): CRLF, quotes where needed, times in whole seconds, empty where not reached. */
export function responseCsv(tables: ResponseTables): string {
	const header = [
		...(tables.by ? [tables.by] : []),
		'step',
		'begun',
		'still_open',
		'median_s',
		'median_lower95_s',
		'median_upper95_s',
		'percentile90_s'
	];
	const rows = tables.rows.map((row) => [
		...(tables.by ? [row.group ?? ''] : []),
		RESPONSE_STEP_LABELS[row.step],
		row.count,
		row.stillOpen,
		seconds(row.medianS),
		seconds(row.medianLowerS),
		seconds(row.medianUpperS),
		seconds(row.percentile90S)
	]);
	return csvText([header, ...rows]);
}

export function responseCsvName({ days, by, to }: ResponseTables): string {
	return `duskline-response-${to.slice(0, 10)}-${days}d${by ? `-by-${by}` : ''}.csv`;
}

function seconds(value: number | null): number | '' {
	return value === null ? '' : Math.round(value);
}
