/** IEC 60757 letters in the standard's order, in which the letters of a two-coloured wire are joined. */
export const COLOUR_LETTERS = [
  'BK',
  'BN',
  'RD',
  'OG',
  'YE',
  'GN',
  'BU',
  'VT',
  'GY',
  'WH',
  'PK',
  'GD',
  'TQ',
  'SR',
] as const;
export type ColourLetters = (typeof COLOUR_LETTERS)[number];

/** Green and yellow together is one colour of its own, written green first: protective earth (IEC 60445). */
export const EARTH_CODE = 'GNYE';

const NAMES: Record<ColourLetters, string> = {
  BK: 'black',
  BN: 'brown',
  RD: 'red',
  OG: 'orange',
  YE: 'yellow',
  GN: 'green',
  BU: 'blue',
  VT: 'violet',
  GY: 'grey',
  WH: 'white',
  PK: 'pink',
  GD: 'gold',
  TQ: 'turquoise',
  SR: 'silver',
};

/** Insulation as drawn: our own choice, no standard's. */
const HEX: Record<ColourLetters, string> = {
  BK: '#1b1d1e',
  BN: '#6e4529',
  RD: '#c2352b',
  OG: '#dd7a1f',
  YE: '#e3b81c',
  GN: '#2f7d4a',
  BU: '#2c62a8',
  VT: '#75489b',
  GY: '#8b8f90',
  WH: '#fdfdfb',
  PK: '#e08ba3',
  GD: '#ab8a3c',
  TQ: '#2a9d97',
  SR: '#b9bec0',
};

/** The thin line around drawn insulation; seen on the linen and on the night ground, where some fills are not. */
export const INSULATION_EDGE_HEX = '#857f72';

/** The colours of one wire: one, or two of which the first is the base. */
export type WireColour = readonly [ColourLetters] | readonly [ColourLetters, ColourLetters];

function lettersOf(text: string): ColourLetters | null {
  return COLOUR_LETTERS.find((letters) => letters === text) ?? null;
}

/**
 * Reads an IEC 60757 code of one or two colours, in any case and with the two in any order; `null` for anything else.
 * Two colours come back in the standard's order, green with yellow as green first.
 */
export function parseColour(text: string): WireColour | null {
  const [, base, stripe] = /^([A-Z]{2})[ /+-]?([A-Z]{2})?$/.exec(text.trim().toUpperCase()) ?? [];
  const first = lettersOf(base ?? '');
  if (first === null) return null;
  if (stripe === undefined) return [first];
  const second = lettersOf(stripe);
  if (second === null || second === first) return null;
  const [early, late] =
    COLOUR_LETTERS.indexOf(first) < COLOUR_LETTERS.indexOf(second) ? [first, second] : [second, first];
  return early === 'YE' && late === 'GN' ? ['GN', 'YE'] : [early, late];
}

/** The code as IEC 60757 writes it: `GN`, `RDBU`, `GNYE`. */
export function colourCode(colour: WireColour): string {
  return colour.join('');
}

/** The colour in words: `green`, `red-blue`. */
export function colourName(colour: WireColour): string {
  return colour.map((letters) => NAMES[letters]).join('-');
}

/** CSS colours of the insulation, the base first. Draw them with an edge of `INSULATION_EDGE_HEX`. */
export function colourHexes(colour: WireColour): string[] {
  return colour.map((letters) => HEX[letters]);
}

/** True for green with yellow, which is kept for protective earth (IEC 60445): warn before it is used for a signal. */
export function isEarthColour(colour: WireColour): boolean {
  return colourCode(colour) === EARTH_CODE;
}
