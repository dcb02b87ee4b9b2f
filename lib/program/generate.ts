import { pieceDurationS, programDurationS } from './duration';
import {
  endLines,
  homeLines,
  pieceLines,
  preambleLines,
  type ProgramLine,
  registerLine,
  trimLines,
} from './parts';
import type { Profile, RunOrder } from './profile';
import { wireNeededMm } from './wire-needed';

/** A run's G-code, one command a line, and what it will take. `wireMm` includes the trim. */
export interface GeneratedProgram {
  text: string;
  pieces: number;
  wireMm: number;
  durationS: number;
  pieceDurationS: number;
}

function part(marker: string, lines: ProgramLine[]): string[] {
  return [`;@ ${marker}`, ...lines.map((line) => line.text)];
}

/**
 * Writes the program of one run as design.md 5 orders it. It does not judge: whether the order fits the
 * profile's limits is for `checkProgram`, which shares no code with this.
 */
export function generateProgram(profile: Profile, order: RunOrder): GeneratedProgram {
  const lines = [
    ...part('preamble', preambleLines(profile)),
    ...part('home', homeLines(profile)),
    ...part('trim', trimLines(profile)),
    ...part('register', [registerLine(profile, order.tag, 0)]),
  ];
  for (let piece = 1; piece <= order.pieces; piece += 1) {
    lines.push(...part(`piece ${piece}`, pieceLines(profile, order.lengthMm, order.tag, piece)));
  }
  lines.push(...part('end', endLines(profile)));
  return {
    text: `${lines.join('\n')}\n`,
    pieces: order.pieces,
    wireMm: wireNeededMm(profile, order),
    durationS: programDurationS(profile, order),
    pieceDurationS: pieceDurationS(profile, order.lengthMm),
  };
}
