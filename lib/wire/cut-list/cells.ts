import { colourName, COLOUR_LETTERS, parseColour, type WireColour } from '@/lib/wire/colour';
import { THICKEST_AWG, THINNEST_AWG } from '@/lib/wire/gauge';
import { parseLengthMm } from '@/lib/wire/length';
import { LINE_LIMITS } from '@/lib/schemas/line-limits';
import type { Separator } from './separator';

/** One cell read, or what to write instead. */
export type Cell<T> = { ok: true; value: T } | { ok: false; instead: string };

const good = <T>(value: T): Cell<T> => ({ ok: true, value });
const bad = <T>(instead: string): Cell<T> => ({ ok: false, instead });

/** Micrometres are the finest the tables keep. */
const roundMm = (mm: number): number => Math.round(mm * 1000) / 1000;

export function readLabel(text: string): Cell<string> {
  const label = text.trim().replaceAll(/\s+/g, ' ');
  if (label === '') return bad('Write a label, such as A1.');
  if (label.length > LINE_LIMITS.labelCharactersMost) {
    return bad(`Shorten it to ${LINE_LIMITS.labelCharactersMost} characters.`);
  }
  return good(label);
}

/** `1,200` in a file whose separator is the comma: one mm or a thousand, nobody can know. */
function isTwoWays(text: string, separator: Separator): boolean {
  return separator === ',' && /^\d{1,3},\d{3}( ?[a-z]+)?$/i.test(text);
}

/** `1.234,5` and `1'234.5` without their thousands marks, or null when it is no such number. */
function withoutThousands(text: string): string | null {
  const [, whole, fraction] = /^(\d{1,3}(?:[.,'’ ]\d{3})+)(?:[.,](\d+))?$/.exec(text) ?? [];
  if (whole === undefined) return null;
  return `${whole.replaceAll(/\D/g, '')}${fraction === undefined ? '' : `.${fraction}`}`;
}

/** A length; a bare number is of the column's `unit`, a unit beside it wins. */
export function readLength(cell: string, unit: 'mm' | 'in', separator: Separator): Cell<number> {
  const text = cell.trim();
  if (text === '')
    return bad(unit === 'mm' ? 'Write a length, such as 63.5.' : 'Write a length, such as 2.5.');
  if (isTwoWays(text, separator)) {
    const digits = text.replaceAll(/\D/g, '');
    return bad(`Write ${digits}, or ${text.replace(',', '.')} if the comma is a decimal mark.`);
  }
  const lengthMm = parseLengthMm(/\d$/.test(text) ? `${text} ${unit}` : text);
  if (lengthMm === null) {
    const plain = withoutThousands(text);
    if (plain !== null) return bad(`Write ${plain}, without a mark for thousands.`);
    return bad('Write a number over 0, such as 63.5, 63,5 or 2.5in.');
  }
  if (roundMm(lengthMm) <= 0) return bad('Write a length over 0.');
  if (lengthMm > LINE_LIMITS.lengthMostMm) return bad(`Write at most ${LINE_LIMITS.lengthMostMm} mm.`);
  return good(roundMm(lengthMm));
}

export function readPieces(cell: string): Cell<number> {
  const text = cell.trim();
  if (text === '') return bad('Write how many pieces, such as 40.');
  // Spreadsheets write 40 as 40.0 when the column is of numbers.
  const whole = /^(\d{1,9})(?:\.0+)?$/.exec(text)?.[1];
  if (whole === undefined) {
    const plain = withoutThousands(text);
    return bad(plain === null ? 'Write a whole number, such as 40.' : `Write ${plain}.`);
  }
  const pieces = Number(whole);
  if (pieces < 1) return bad('Write at least 1, or take the line out.');
  if (pieces > LINE_LIMITS.piecesMost) return bad(`Write at most ${LINE_LIMITS.piecesMost}.`);
  return good(pieces);
}

/** A tolerance in mm, with or without the `sign` of its column; empty means the workshop's own. */
export function readTolerance(cell: string, sign: '-' | '+', fallbackMm: number): Cell<number> {
  const trimmed = cell.trim().replace('−', '-');
  const text = trimmed.startsWith(sign) ? trimmed.slice(1).trim() : trimmed;
  if (trimmed === sign) return bad(`Write mm, such as 3, or leave it empty for the workshop’s own.`);
  if (text === '') return good(fallbackMm);
  if (/^0+([.,]0+)?( ?mm)?$/i.test(text)) return good(0);
  const toleranceMm = parseLengthMm(text);
  if (toleranceMm === null) return bad('Write mm, such as 3, or leave it empty for the workshop’s own.');
  if (toleranceMm > LINE_LIMITS.toleranceMostMm) return bad(`Write at most ${LINE_LIMITS.toleranceMostMm}.`);
  return good(roundMm(toleranceMm));
}

export function readGauge(cell: string): Cell<number> {
  const text = cell.trim();
  const digits = /^(?:awg|#)?\s*(\d{1,2})(?:\.0+)?\s*(?:awg)?$/i.exec(text)?.[1];
  if (digits === undefined) return bad('Write the AWG number alone, such as 30.');
  const gauge = Number(digits);
  if (gauge < THICKEST_AWG || gauge > THINNEST_AWG) {
    return bad(`Write a gauge from ${THICKEST_AWG} to ${THINNEST_AWG} AWG.`);
  }
  return good(gauge);
}

/** IEC 60757 letters of a colour that somebody wrote as a word, or null. */
function codeOfName(name: string): string | null {
  const plain = name.toLowerCase().replace('gray', 'grey').replace('purple', 'violet');
  return COLOUR_LETTERS.find((letters) => colourName([letters]) === plain) ?? null;
}

export function readColour(cell: string): Cell<WireColour> {
  const text = cell.trim();
  const colour = parseColour(text);
  if (colour !== null) return good(colour);
  const code = codeOfName(text);
  if (code !== null) return bad(`Write ${code}.`);
  return bad(`Write IEC 60757 letters: ${COLOUR_LETTERS.join(' ')}, or two of them joined, such as RDBU.`);
}
