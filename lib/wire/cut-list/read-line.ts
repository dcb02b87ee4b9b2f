import { isEarthColour } from '@/lib/wire/colour';
import { type Cell, readColour, readGauge, readLabel, readLength, readPieces, readTolerance } from './cells';
import type { ColumnPlaces, CutListColumn } from './columns';
import { matchWire } from './match-wire';
import type { CutListKnowledge, CutListLine, CutListProblem, CutListRow } from './reading';
import type { Separator } from './separator';

export interface LineReading {
  line: CutListLine;
  problems: CutListProblem[];
  warnings: CutListProblem[];
}

/** Everything that reading one line needs beside the line. */
export interface LineReader {
  places: ColumnPlaces;
  separator: Separator;
  known: CutListKnowledge;
}

/** A wire is said by three cells: any of them may be the wrong one. */
const WIRE_COLUMNS = 'gauge_awg, insulation, colour';
const EARTH = 'Green with yellow is kept for protective earth. Is this an earth wire?';
/** Longer finds are cut: the page shows them in a narrow column. */
const FOUND_CHARACTERS_MOST = 60;

function shown(text: string): string {
  const one = text.trim().replaceAll(/\s+/g, ' ');
  if (one === '') return 'nothing';
  return one.length > FOUND_CHARACTERS_MOST ? `${one.slice(0, FOUND_CHARACTERS_MOST)}…` : one;
}

/** Reads one row into a line; what cannot be read is null in the line and told as a problem. Never throws. */
export function readLine(row: CutListRow, { places, separator, known }: LineReader): LineReading {
  const problems: CutListProblem[] = [];
  const warnings: CutListProblem[] = [];
  const text = (column: CutListColumn): string => {
    const place = places[column];
    return (place === undefined ? undefined : row.cells[place]) ?? '';
  };
  const take = <T>(column: CutListColumn, read: (cell: string) => Cell<T>): T | null => {
    // A column that is missing as a whole was told once, with the header.
    if (places[column] === undefined && !column.startsWith('tolerance')) return null;
    const cell = read(text(column));
    if (cell.ok) return cell.value;
    problems.push({ row: row.row, column, found: shown(text(column)), instead: cell.instead });
    return null;
  };

  const { defaults } = known;
  const unit = places.length_in === undefined ? 'mm' : 'in';
  const gaugeAwg = take('gauge_awg', readGauge);
  const colour = take('colour', readColour);
  const insulation = take('insulation', readInsulation);
  const line: CutListLine = {
    row: row.row,
    label: take('label', readLabel),
    wire: null,
    lengthMm: take(unit === 'mm' ? 'length_mm' : 'length_in', (cell) => readLength(cell, unit, separator)),
    toleranceMinusMm: take('tolerance_minus_mm', (cell) =>
      readTolerance(cell, '-', defaults.toleranceMinusMm),
    ),
    tolerancePlusMm: take('tolerance_plus_mm', (cell) => readTolerance(cell, '+', defaults.tolerancePlusMm)),
    pieces: take('pieces', readPieces),
  };
  if (gaugeAwg !== null && colour !== null && insulation !== null) {
    const match = matchWire(known.wires, { gaugeAwg, colour, insulation, conductor: text('conductor') });
    if (match.ok) line.wire = match.wire;
    else problems.push({ row: row.row, column: WIRE_COLUMNS, found: match.found, instead: match.instead });
  }
  if (colour !== null && isEarthColour(colour)) {
    warnings.push({ row: row.row, column: 'colour', found: shown(text('colour')), instead: EARTH });
  }
  return { line, problems, warnings };
}

function readInsulation(cell: string): Cell<string> {
  const text = cell.trim();
  if (text !== '') return { ok: true, value: text };
  return { ok: false, instead: 'Write the insulation, such as ETFE.' };
}
