import { csvTable } from './csvTable';
import type { ExportTable } from './tableColumn';
import { voTable } from './voTable';

const FORMATS = {
	csv: { write: csvTable, contentType: 'text/csv; charset=utf-8; header=present' },
	vot: { write: voTable, contentType: 'application/x-votable+xml; charset=utf-8' }
};
export type TableFormat = keyof typeof FORMATS;

/** A table as a file to keep, named `duskline-{stem}.{format}`. */
export function tableAnswer<Row>(
	table: ExportTable<Row>,
	format: TableFormat,
	stem: string
): Response {
	const { write, contentType } = FORMATS[format];
	return new Response(write(table), {
		headers: {
			'content-type': contentType,
			'content-disposition': `attachment; filename="duskline-${stem.replace(/[^\w.-]/g, '_')}.${format}"`,
			'cache-control': 'private, no-store'
		}
	});
}
