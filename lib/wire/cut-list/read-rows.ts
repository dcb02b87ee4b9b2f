import { LINE_LIMITS } from '@/lib/schemas/line-limits';
import { readHeader } from './columns';
import { type LineReader, readLine } from './read-line';
import type { CutListKnowledge, CutListProblem, CutListReading, CutListRow } from './reading';
import type { Separator } from './separator';

/** The reading of a file that could not be read at all. */
export function unreadable(problem: CutListProblem): CutListReading {
  return { lines: [], problems: [problem], warnings: [] };
}

const isBlank = (row: CutListRow): boolean => row.cells.every((cell) => cell.trim() === '');

/** Cells past the header that hold something: mostly a decimal comma in a file separated by commas. */
function surplusCells(row: CutListRow, columns: number, separator: Separator): CutListProblem[] {
  const surplus = row.cells.slice(columns).filter((cell) => cell.trim() !== '');
  if (surplus.length === 0) return [];
  const instead =
    separator === ','
      ? 'Write decimal points, put such cells in quotes, or separate by semicolons.'
      : 'Put cells that hold the separator in quotes.';
  return [{ row: row.row, column: null, found: `more cells than the header has columns`, instead }];
}

function repeatedLabels(lines: CutListReading['lines']): CutListProblem[] {
  const first = new Map<string, number>();
  const warnings: CutListProblem[] = [];
  for (const { label, row } of lines) {
    if (label === null) continue;
    const earlier = first.get(label);
    if (earlier === undefined) first.set(label, row);
    else
      warnings.push({
        row,
        column: 'label',
        found: label,
        instead: `Row ${earlier} has this label too. Both are cut.`,
      });
  }
  return warnings;
}

/**
 * Rows of a cut list to lines. The first row that is not blank is the header. Never throws: what is wrong is in
 * `problems`, and nothing may be saved while there is one.
 */
export function readRows(all: CutListRow[], separator: Separator, known: CutListKnowledge): CutListReading {
  const [header, ...rows] = all.filter((row) => !isBlank(row));
  if (!header) {
    return unreadable({ row: null, column: null, found: 'no rows', instead: 'Write a header and lines.' });
  }
  const { places, ...read } = readHeader(header.cells, header.row);
  if (Object.keys(places).length === 0) {
    return unreadable({
      row: header.row,
      column: null,
      found: 'no header',
      instead: 'Begin with a row of column names: label, length_mm, pieces, gauge_awg, insulation, colour.',
    });
  }
  if (rows.length === 0) {
    const instead = 'Write one line for each length to cut.';
    return {
      ...unreadable({ row: null, column: null, found: 'no lines', instead }),
      warnings: read.warnings,
    };
  }
  if (rows.length > LINE_LIMITS.linesMost) {
    return unreadable({
      row: null,
      column: null,
      found: `${rows.length} lines`,
      instead: `Split it into files of at most ${LINE_LIMITS.linesMost} lines.`,
    });
  }
  const reader: LineReader = { places, separator, known };
  const readings = rows.map((row) => ({
    ...readLine(row, reader),
    surplus: surplusCells(row, header.cells.length, separator),
  }));
  const lines = readings.map(({ line }) => line);
  return {
    lines,
    problems: [...read.problems, ...readings.flatMap(({ surplus, problems }) => [...surplus, ...problems])],
    warnings: [
      ...read.warnings,
      ...readings.flatMap(({ warnings }) => warnings),
      ...repeatedLabels(lines),
    ].toSorted((a, b) => (a.row ?? 0) - (b.row ?? 0)),
  };
}
