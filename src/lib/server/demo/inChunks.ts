/** PostgreSQL takes 65 535 parameters in one statement at most. */
const ROWS_A_STATEMENT = 500;

/** Hands rows to `insert` in pieces that fit into one statement. */
export async function inChunks<Row>(
	rows: Row[],
	insert: (rows: Row[]) => PromiseLike<unknown>
): Promise<void> {
	for (let from = 0; from < rows.length; from += ROWS_A_STATEMENT) {
		await insert(rows.slice(from, from + ROWS_A_STATEMENT));
	}
}
