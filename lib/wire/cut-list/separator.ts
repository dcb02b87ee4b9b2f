import { knownHeaders } from './columns';

export const SEPARATORS = [';', '\t', ','] as const;
export type Separator = (typeof SEPARATORS)[number];

/** A first line such as `sep=;`, by which spreadsheets tell each other the separator. */
const TOLD = /^\uFEFF?"?sep=(.)"?[ \t;,]*(\r\n|\r|\n)/i;

function firstLine(text: string): string {
  return text.split(/\r\n|\r|\n/).find((line) => line.trim() !== '') ?? '';
}

function unquoted(cell: string): string {
  return cell.trim().replace(/^"(.*)"$/, '$1');
}

/** The separator of a cut list: the one that makes most headers of its first line known; a semicolon wins a tie. */
export function separatorOf(text: string): Separator {
  const told = TOLD.exec(text)?.[1];
  const line = firstLine(text);
  const scored = SEPARATORS.map((separator) => ({
    separator,
    known: knownHeaders(line.split(separator).map(unquoted)),
    cells: line.split(separator).length,
  }));
  const best = scored.toSorted((a, b) => b.known - a.known || b.cells - a.cells)[0];
  return SEPARATORS.find((separator) => separator === told) ?? best?.separator ?? ';';
}

/** The text with a `sep=` line emptied, so that rows keep their numbers. */
export function withoutSeparatorLine(text: string): string {
  return text.replace(TOLD, '$2');
}
