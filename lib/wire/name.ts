import { colourName, parseColour } from './colour';

/** A wire as its stored row describes it: `colour` is its IEC 60757 code. */
export interface NamedWire {
  gaugeAwg: number;
  colour: string;
  insulation: string;
}

/** The short name that stands on strips and labels: `GN 30 AWG`. */
export function wireName({ gaugeAwg, colour }: Pick<NamedWire, 'gaugeAwg' | 'colour'>): string {
  return `${colour} ${gaugeAwg} AWG`;
}

/** The full name, with the colour in words: `GN green, 30 AWG ETFE`. A code that is none stands without words. */
export function fullWireName({ gaugeAwg, colour, insulation }: NamedWire): string {
  const parsed = parseColour(colour);
  const spoken = parsed ? `${colour} ${colourName(parsed)}` : colour;
  return `${spoken}, ${gaugeAwg} AWG ${insulation}`.trimEnd();
}
