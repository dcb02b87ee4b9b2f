import type { FieldProblem } from '@/lib/errors';
import {
  batchLineInputSchema,
  type BatchDto,
  type BatchLineDto,
  type ChangedLine,
} from '@/lib/schemas/batches';
import { parseLengthMm } from '@/lib/wire/length';

/** One line as it is typed. `key` stays with the row; `id` is the stored line's, null for a new one. */
export interface FormRow {
  key: number;
  id: string | null;
  label: string;
  wireId: string;
  length: string;
  pieces: string;
  minus: string;
  plus: string;
  /** Pieces that are cut or on a rig: wire, length and tolerance then stay. */
  committed: number;
}

export type RowField = 'label' | 'wireId' | 'length' | 'pieces' | 'minus' | 'plus';

/** Which input field of a line each typed field becomes. */
const INPUT_OF: Record<RowField, string> = {
  label: 'label',
  wireId: 'wireId',
  length: 'lengthMm',
  pieces: 'pieces',
  minus: 'toleranceMinusMm',
  plus: 'tolerancePlusMm',
};

export interface Usual {
  wireId: string;
  minus: string;
  plus: string;
}

export interface FormRows {
  rows: FormRow[];
  nextKey: number;
}

export type RowsAction =
  | { act: 'type'; key: number; field: RowField; text: string }
  | { act: 'add'; usual: Usual }
  | { act: 'remove'; key: number; usual: Usual };

function emptyRow(key: number, { wireId, minus, plus }: Usual): FormRow {
  return { key, id: null, label: '', wireId, length: '', pieces: '', minus, plus, committed: 0 };
}

function committedOf(line: BatchLineDto): number {
  const onRigs = line.lots.filter((lot) => lot.state !== 'waiting' && lot.state !== 'withdrawn');
  return onRigs.reduce((sum, lot) => sum + lot.pieces, 0);
}

/** A form with one empty line. */
export function newRows(usual: Usual): FormRows {
  return { rows: [emptyRow(1, usual)], nextKey: 2 };
}

/** A form of a batch as it stands. */
export function rowsOfBatch(batch: BatchDto): FormRows {
  const rows = batch.lineList
    .filter((line) => line.pieces > 0)
    .map((line, index) => ({
      key: index + 1,
      id: line.id,
      label: line.label,
      wireId: line.wire.id,
      length: String(line.lengthMm),
      pieces: String(line.pieces),
      minus: String(line.toleranceMinusMm),
      plus: String(line.tolerancePlusMm),
      committed: committedOf(line),
    }));
  return { rows, nextKey: rows.length + 1 };
}

/** Typing, adding and removing lines. A new line takes wire and tolerance from the one above; one line always stays. */
export function changeRows(state: FormRows, action: RowsAction): FormRows {
  switch (action.act) {
    case 'type':
      return {
        ...state,
        rows: state.rows.map((row) =>
          row.key === action.key ? { ...row, [action.field]: action.text } : row,
        ),
      };
    case 'add': {
      const last = state.rows.at(-1);
      const usual = last ? { wireId: last.wireId, minus: last.minus, plus: last.plus } : action.usual;
      return { rows: [...state.rows, emptyRow(state.nextKey, usual)], nextKey: state.nextKey + 1 };
    }
    case 'remove': {
      const rows = state.rows.filter((row) => row.key !== action.key || row.committed > 0);
      if (rows.length > 0) return { ...state, rows };
      return { rows: [emptyRow(state.nextKey, action.usual)], nextKey: state.nextKey + 1 };
    }
  }
}

/** A number with a point or a comma; `NaN`, which the schema refuses, for anything else. */
function numberOf(text: string): number {
  const plain = text.trim().replace(',', '.');
  return plain === '' ? Number.NaN : Number(plain);
}

/** The lines as they are sent, and what is wrong with them by `lines.<index>.<field>`, as the server would say it. */
export function linesOfRows(rows: readonly FormRow[]): { lines: ChangedLine[]; fields: FieldProblem[] } {
  const lines = rows.map((row) => ({
    id: row.id,
    label: row.label.trim(),
    wireId: row.wireId,
    lengthMm: parseLengthMm(row.length) ?? Number.NaN,
    toleranceMinusMm: numberOf(row.minus),
    tolerancePlusMm: numberOf(row.plus),
    pieces: numberOf(row.pieces),
  }));
  const fields = lines.flatMap((line, index) => {
    const parsed = batchLineInputSchema.safeParse(line);
    if (parsed.success) return [];
    return parsed.error.issues.map(({ path, message }) => ({
      path: `lines.${index}.${path.join('.')}`,
      message,
    }));
  });
  return { lines, fields };
}

/** What is wrong with one field of the row at `index`. */
export function rowProblem(
  fields: readonly FieldProblem[],
  index: number,
  field: RowField,
): string | undefined {
  return fields.find(({ path }) => path === `lines.${index}.${INPUT_OF[field]}`)?.message;
}
