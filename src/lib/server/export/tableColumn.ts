/** One column of a table that leaves Duskline, the same for every format. */
export type TableColumn<Row> = {
	name: string;
	datatype: 'double' | 'int' | 'char';
	/** As VOUnits writes it. */
	unit?: string;
	/** UCD1+ of the IVOA. */
	ucd?: string;
	/** What the numbers are counted in: positions in ICRS, times as MJD or ISO 8601, all UTC. */
	frame?: 'icrs' | 'mjd' | 'iso';
	description: string;
	/** Null where it is not known. */
	value: (row: Row) => string | number | null;
};

export type ExportTable<Row> = {
	name: string;
	description: string;
	/** What holds for the whole table: names, values and what they mean. */
	facts: { name: string; value: string }[];
	columns: TableColumn<Row>[];
	rows: Row[];
};
