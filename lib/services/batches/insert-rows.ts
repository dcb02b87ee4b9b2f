/** Rows of one INSERT: a statement has at most 65,535 parameters. */
const ROWS_MOST = 2000;

/** Hands rows on in parts that fit one statement, in order. */
export async function inParts<Row>(
  rows: readonly Row[],
  insert: (part: Row[]) => Promise<unknown>,
): Promise<void> {
  for (let from = 0; from < rows.length; from += ROWS_MOST) await insert(rows.slice(from, from + ROWS_MOST));
}
