import { profileFaults } from './check-profile';
import type { Profile, RunOrder } from './profile';
import { readProgram } from './read';
import type { ProgramProblem, ProgramStep } from './steps';

/** A printed feed differs from the order by rounding alone. */
const LENGTH_ROUNDING_MM = 0.001;

function lengthOf(piece: ProgramStep[], { feed }: Profile): number | null {
  const last = piece.findLast((step) => step.kind === 'feed');
  return last ? last.feedTo / feed.feedPerMm : null;
}

/**
 * Reads the program (see `readProgram`) and holds it against what was ordered: tag, pieces, length. No problem means
 * that it may be sent. What belongs to the profile or the whole program has line number 1.
 */
export function checkProgram(text: string, profile: Profile, order: RunOrder): ProgramProblem[] {
  const faults = profileFaults(profile);
  if (faults.length > 0) {
    return faults.map(({ path, message }) => ({
      lineNumber: 1,
      message: `Profile, ${path.join('.')}: ${message}`,
    }));
  }
  const reading = readProgram(text, profile);
  if (!reading.ok) return reading.problems;
  const { tag, pieces } = reading.program;
  const messages: string[] = [];
  if (profile.registerAxis !== null && tag !== order.tag)
    messages.push(`The tag is ${tag}, not ${order.tag}.`);
  if (pieces.length !== order.pieces) messages.push(`It cuts ${pieces.length} pieces, not ${order.pieces}.`);
  const lengthMm = lengthOf(pieces[0] ?? [], profile);
  if (lengthMm === null || Math.abs(lengthMm - order.lengthMm) > LENGTH_ROUNDING_MM) {
    messages.push(`It cuts pieces of ${lengthMm} mm, not ${order.lengthMm} mm.`);
  }
  return messages.map((message) => ({ lineNumber: 1, message }));
}
