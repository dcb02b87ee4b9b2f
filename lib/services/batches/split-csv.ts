import { CsvError, parse } from 'csv-parse/sync';
import type { CutListProblem, CutListRow } from '@/lib/wire/cut-list/reading';
import type { Separator } from '@/lib/wire/cut-list/separator';

export type CsvSplit = { ok: true; rows: CutListRow[] } | { ok: false; problem: CutListProblem };

/** A record longer than this is a quote that was never closed, not a line of a cut list. */
const RECORD_CHARACTERS_MOST = 20_000;

const QUOTE = 'Close each quote that is opened, and write a quote inside one twice.';

function problemOf(error: CsvError): CutListProblem {
  const lines = typeof error['lines'] === 'number' ? error['lines'] : null;
  return { row: lines, column: null, found: 'quotes that do not match', instead: QUOTE };
}

/** The row of the file in which a record begins; `lines` counts through its last. */
function firstRow(record: string[], lines: number): number {
  return lines - record.reduce((sum, cell) => sum + (cell.match(/\r\n|\r|\n/g)?.length ?? 0), 0);
}

/** Splits text into rows of cells with the numbers they have in the file. Broken quoting is a problem, not an error. */
export function splitCsv(text: string, separator: Separator): CsvSplit {
  const rows: CutListRow[] = [];
  try {
    parse(text, {
      delimiter: separator,
      relax_column_count: true,
      // Inches are written as 2.5" without any quoting.
      relax_quotes: true,
      max_record_size: RECORD_CHARACTERS_MOST,
      on_record: (cells: string[], { lines }) => {
        rows.push({ row: firstRow(cells, lines), cells });
        return null;
      },
    });
    return { ok: true, rows };
  } catch (error) {
    if (error instanceof CsvError) return { ok: false, problem: problemOf(error) };
    throw error;
  }
}
