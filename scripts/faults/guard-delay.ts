import { pieceDurationS } from '@/lib/program/duration';
import type { Profile } from '@/lib/program/profile';

/** Home and trim have no reading of the guard between them; generous, s. */
const HOME_AND_TRIM_S = 12;

/**
 * How long a rig may begin new motions after its guard was opened, s of its own time: the agent reads the guard
 * between pieces, so the piece under way is finished, or the way home.
 */
export function cyclesDurationS(profile: Profile, lengthMm: number): number {
  return HOME_AND_TRIM_S + pieceDurationS(profile, lengthMm);
}
