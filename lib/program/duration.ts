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

/** From a line's last byte sent to the next line's first: round trip on USB and the agent's own work. */
export const LINE_TURNAROUND_S = 0.002;

/** Seconds of the lines' motion, each from rest to rest, and a turnaround for each line. */
function linesDurationS(lines: ProgramLine[], turnaroundS: number): number {
  return lines.reduce((sumS, line) => sumS + line.motionS + turnaroundS, 0);
}

/** Seconds that one piece of `lengthMm` takes, from its first feed to the jaws open again. */
export function pieceDurationS(
  profile: Profile,
  lengthMm: number,
  lineTurnaroundS = LINE_TURNAROUND_S,
): number {
  return linesDurationS(pieceLines(profile, lengthMm, 1, 1), lineTurnaroundS);
}

/** Seconds that a whole run takes without a pause, homing and trim included, waits for people not. */
export function programDurationS(
  profile: Profile,
  order: RunOrder,
  lineTurnaroundS = LINE_TURNAROUND_S,
): number {
  const around = [
    ...preambleLines(profile),
    ...homeLines(profile),
    ...trimLines(profile),
    registerLine(profile, order.tag, 0),
    ...endLines(profile),
  ];
  return (
    linesDurationS(around, lineTurnaroundS) +
    order.pieces * pieceDurationS(profile, order.lengthMm, lineTurnaroundS)
  );
}
