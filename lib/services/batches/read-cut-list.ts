import { decodeText } from '@/lib/wire/cut-list/decode';
import { CUT_LIST_BYTES_MOST, type CutListKnowledge, type CutListReading } from '@/lib/wire/cut-list/reading';
import { readRows, unreadable } from '@/lib/wire/cut-list/read-rows';
import { separatorOf, withoutSeparatorLine } from '@/lib/wire/cut-list/separator';
import { splitCsv } from './split-csv';

/**
 * A cut list file, as bytes, to lines as they were understood. Nothing is stored and nothing thrown, whatever the
 * bytes are: `problems` say the row, the column, what was found and what to write instead.
 */
export function readCutList(bytes: Uint8Array, known: CutListKnowledge): CutListReading {
  if (bytes.length > CUT_LIST_BYTES_MOST) {
    const found = `${Math.ceil(bytes.length / 1000)} kB`;
    return unreadable({ row: null, column: null, found, instead: 'Split it into files under 1 MB.' });
  }
  const decoded = decodeText(bytes);
  if (!decoded.ok) {
    return unreadable({ row: null, column: null, found: decoded.found, instead: decoded.instead });
  }
  const separator = separatorOf(decoded.text);
  const split = splitCsv(withoutSeparatorLine(decoded.text), separator);
  return split.ok ? readRows(split.rows, separator, known) : unreadable(split.problem);
}
