import type { CutListProblem } from './reading';

/** The columns of a cut list, in the order the shipped example has them. */
export const CUT_LIST_COLUMNS = [
  'label',
  'length_mm',
  'length_in',
  'pieces',
  'gauge_awg',
  'conductor',
  'insulation',
  'colour',
  'tolerance_minus_mm',
  'tolerance_plus_mm',
] as const;
export type CutListColumn = (typeof CUT_LIST_COLUMNS)[number];

/** Columns without which no line can be read; a length may come in either unit. */
const NEEDED: readonly CutListColumn[] = ['label', 'pieces', 'gauge_awg', 'insulation', 'colour'];

/** Headers seen elsewhere, with the column that was probably meant. Only `color` is taken as it is. */
const LOOKALIKES: Readonly<Record<string, CutListColumn>> = {
  name: 'label',
  wire: 'label',
  id: 'label',
  length: 'length_mm',
  len: 'length_mm',
  mm: 'length_mm',
  qty: 'pieces',
  quantity: 'pieces',
  count: 'pieces',
  pcs: 'pieces',
  number: 'pieces',
  awg: 'gauge_awg',
  gauge: 'gauge_awg',
  jacket: 'insulation',
  material: 'insulation',
  colours: 'colour',
  colour_code: 'colour',
  tolerance_minus: 'tolerance_minus_mm',
  tolerance_plus: 'tolerance_plus_mm',
  minus_mm: 'tolerance_minus_mm',
  plus_mm: 'tolerance_plus_mm',
};

/** Where each column stands in a row's cells. */
export type ColumnPlaces = Partial<Record<CutListColumn, number>>;

export interface HeaderReading {
  places: ColumnPlaces;
  problems: CutListProblem[];
  warnings: CutListProblem[];
}

/** `Length (mm)`, `LENGTH-MM` and ` length_mm ` are one header. */
export function plainHeader(text: string): string {
  return text
    .trim()
    .toLowerCase()
    .replaceAll(/[^\p{L}\p{N}]+/gu, '_')
    .replaceAll(/^_+|_+$/g, '');
}

/** The column of a header, or null when it is none of ours. */
export function columnOf(header: string): CutListColumn | null {
  const plain = plainHeader(header).replace(/^color$/, 'colour');
  return CUT_LIST_COLUMNS.find((column) => column === plain) ?? null;
}

/** How many of a row's cells are headers of ours; tells separators apart. */
export function knownHeaders(cells: string[]): number {
  return cells.filter((cell) => columnOf(cell) !== null).length;
}

function problemOfUnknown(row: number, header: string): CutListProblem {
  const meant = LOOKALIKES[plainHeader(header)];
  const instead = meant
    ? `If this is ${meant}, name the column ${meant}. It is not read as it stands.`
    : 'This column is not read.';
  return { row, column: header.trim() || '(no name)', found: header.trim(), instead };
}

function missing(places: ColumnPlaces, row: number): CutListProblem[] {
  const names: string[] = NEEDED.filter((column) => places[column] === undefined);
  if (places.length_mm === undefined && places.length_in === undefined) names.push('length_mm');
  return names.map((column) => ({
    row,
    column,
    found: 'no such column',
    instead: `Add a column named ${column}.`,
  }));
}

/** Reads the header row: which column stands where, which are missing, twice or not ours. */
export function readHeader(cells: string[], row: number): HeaderReading {
  const places: ColumnPlaces = {};
  const problems: CutListProblem[] = [];
  const warnings: CutListProblem[] = [];
  cells.forEach((cell, index) => {
    const column = columnOf(cell);
    if (column === null) {
      // A separator at the end of each row makes one nameless column; nobody needs to hear of it.
      if (cell.trim() !== '') warnings.push(problemOfUnknown(row, cell));
    } else if (places[column] !== undefined) {
      problems.push({ row, column, found: 'this column twice', instead: 'Keep one of the two.' });
    } else places[column] = index;
  });
  if (places.length_mm !== undefined && places.length_in !== undefined) {
    problems.push({
      row,
      column: 'length_in',
      found: 'length_mm and length_in',
      instead: 'Keep one of the two.',
    });
  }
  return { places, problems: [...problems, ...missing(places, row)], warnings };
}
