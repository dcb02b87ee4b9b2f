export const MM_PER_INCH = 25.4;

const LENGTH = /^(\d{1,7})(?:[.,](\d{1,6}))?\s*(mm|in|inch|inches|"|″|'')?$/i;

/**
 * Reads a length of wire as a person writes it and gives mm: `63.5`, `63,5`, `63.5 mm`, `2.5in`, `2.5"`. A bare number is
 * mm. One separator only, and it is the decimal mark. `null` for anything else, for zero and for signs.
 */
export function parseLengthMm(text: string): number | null {
  const [, whole, fraction = '0', unit = 'mm'] = LENGTH.exec(text.trim()) ?? [];
  if (whole === undefined) return null;
  const value = Number(`${whole}.${fraction}`);
  if (value === 0) return null;
  return unit.toLowerCase() === 'mm' ? value : inchToMm(value);
}

/** Exactly 25.4 mm an inch, to a millionth of a mm so that binary fractions do not show: 2.3 in is 58.42 mm. */
export function inchToMm(inches: number): number {
  return Math.round(inches * MM_PER_INCH * 1e6) / 1e6;
}

/** Millimetres for a screen or a label, at most two decimals and none for nothing: `63.5 mm`. */
export function spokenMm(lengthMm: number): string {
  return `${Number(lengthMm.toFixed(2))} mm`;
}
