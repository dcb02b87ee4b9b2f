import type { WireDto } from '@/lib/schemas/stock';

/** What is wrong or odd: `row` as counted in the file (1 is the first), null when it is the whole file. */
export interface CutListProblem {
  row: number | null;
  column: string | null;
  found: string;
  instead: string;
}

/** One row of a file as split into cells. */
export interface CutListRow {
  row: number;
  cells: string[];
}

/** One line as it was understood; null is what could not be read, and a problem says why. */
export interface CutListLine {
  row: number;
  label: string | null;
  wire: WireDto | null;
  lengthMm: number | null;
  toleranceMinusMm: number | null;
  tolerancePlusMm: number | null;
  pieces: number | null;
}

/** A whole file as it was understood. It may be saved when there is no problem; warnings are for a second look. */
export interface CutListReading {
  lines: CutListLine[];
  problems: CutListProblem[];
  warnings: CutListProblem[];
}

/** What the workshop has and takes for granted. */
export interface CutListKnowledge {
  wires: readonly WireDto[];
  defaults: { toleranceMinusMm: number; tolerancePlusMm: number };
}

/** A file over this is refused before it is read. */
export const CUT_LIST_BYTES_MOST = 1_000_000;
