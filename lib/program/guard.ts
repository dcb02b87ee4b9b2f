import { endLines, homeLines, pieceLines, type ProgramLine, trimLines } from './parts';
import type { Profile } from './profile';
import { homingMs } from './reading/deadline';

/** How often the agent reads switches and heaters: idle, and between the parts of a program. */
export const POLL_EVERY_MS = 1_000;

/** One line and its answer at the slowest baud rate, with the agent's own work: 80 characters and as many back. */
const SLOW_LINE_S = 0.03;

/** Switches, heaters and display are seen to between two parts. */
const LINES_BETWEEN = 3;

function motionS(lines: readonly ProgramLine[]): number {
  return lines.reduce((sumS, line) => sumS + line.motionS, 0);
}

function partS(lines: readonly ProgramLine[]): number {
  return motionS(lines) + (lines.length + LINES_BETWEEN) * SLOW_LINE_S;
}

/** Homing as slowly as the slowest firmware homes, in place of the generator's usual speed. */
function homeS(profile: Profile): number {
  const lines = homeLines(profile);
  const moved = lines.filter(({ text }) => !text.startsWith('G28'));
  const homed = moved.length < lines.length;
  return partS(lines) - motionS(lines) + motionS(moved) + (homed ? homingMs(profile) / 1000 : 0);
}

/**
 * The most seconds from the guard's opening to the end of the last motion, for pieces of `lengthMm` (the profile's
 * longest when not given). 0 where the guard cuts motor power itself; null where nothing tells that it is open, so
 * that the run goes on.
 *
 * The agent reads the switch (`M119`) where a part of the program begins (home, trim, each piece, end), when the last
 * reading is 1 s old or more. The worst opening comes just after a reading: parts that begin within that second are
 * still begun, and the last of them is carried out whole. The stroke that opens the jaws is then still on its way,
 * for it is awaited only in the next part. So
 *
 *     delay = 1 s + max(home, trim, piece, end with the stroke before it) + stroke
 *
 * A piece is counted with the stroke before it: feed, cut and one opening of the jaws. That `M112` may end the stroke
 * sooner is not relied on. A disturbed line comes on top: each answer that is lost may cost its motion and 3 s more.
 */
export function guardDelayS(profile: Profile, lengthMm = profile.feed.longestPieceMm): number | null {
  const { guardCutsMotorPower, guardSwitch } = profile.fitted;
  if (guardCutsMotorPower) return 0;
  if (guardSwitch === null) return null;
  const strokeS = pieceLines(profile, lengthMm, 1, 1).at(-1)?.motionS ?? 0;
  const longestPartS = Math.max(
    homeS(profile),
    partS(trimLines(profile)),
    partS(pieceLines(profile, lengthMm, 1, 1)),
    partS(endLines(profile)) + strokeS,
  );
  return POLL_EVERY_MS / 1000 + longestPartS + strokeS;
}

/** Seconds for a person, rounded up: `6 s`, from two minutes on `3 min`. */
function upTo(seconds: number): string {
  return seconds < 120 ? `${Math.ceil(seconds)} s` : `${Math.ceil(seconds / 60)} min`;
}

/** What a guard with this delay does, and what that asks of you. */
export function guardWords(delayS: number | null): string {
  if (delayS === null) {
    return 'Nothing tells that the guard is open: the rig cuts on. Keep your hands out until it stands.';
  }
  if (delayS === 0)
    return 'By its profile this guard cuts motor power: open it, and the motors stop at once.';
  return `This guard only tells: after you open it, the rig may move for up to ${upTo(delayS)}. Keep your hands out until it stands.`;
}
