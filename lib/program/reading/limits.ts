import type { Profile } from '../profile';

/** Half of the last printed decimal: a position of the profile and the same position printed differ by no more. */
const POSITION_ROUNDING_MM = 0.0005 + 1e-9;
const FEED_ROUNDING_UNITS = 0.0001 + 1e-9;

/** Firmware refuses longer feeds and goes on as if they had happened (protocol.md 0.2). */
const LONGEST_FEED_UNITS = 150;

export type Place = 'standby' | 'cut' | 'park' | 'home';

/** Why the cut axis may not be told this position at this place of the program; `null` when it may. */
export function positionProblem(profile: Profile, place: Place, atMm: number): string | null {
  const { cutAxis } = profile;
  const { lowestMm, highestMm } = cutAxis;
  if (atMm < lowestMm - POSITION_ROUNDING_MM || atMm > highestMm + POSITION_ROUNDING_MM) {
    return `${cutAxis.axis}${atMm} is outside ${lowestMm} to ${highestMm} mm.`;
  }
  const wantedMm = {
    standby: cutAxis.standbyMm,
    cut: cutAxis.cutMm,
    park: cutAxis.parkMm,
    home: cutAxis.homeMm,
  }[place];
  if (Math.abs(atMm - wantedMm) <= POSITION_ROUNDING_MM) return null;
  return `${cutAxis.axis}${atMm} is not the ${place} position, ${wantedMm} mm.`;
}

/** Why the cut axis may not move at this speed. */
export function pressSpeedProblem({ cutAxis }: Profile, mmPerMin: number): string | null {
  return mmPerMin <= cutAxis.speedMmS * 60 + 1e-6
    ? null
    : `F${mmPerMin} is faster than ${cutAxis.speedMmS} mm/s.`;
}

/** Why a feed from one absolute coordinate to the next (E units) may not be. */
export function feedProblem(
  { feed }: Profile,
  fedTo: number,
  move: { feedTo: number; unitsPerMin: number },
): string | null {
  const units = move.feedTo - fedTo;
  if (units <= 0) return `E${move.feedTo} does not feed on from E${fedTo}.`;
  const longestUnits = Math.min(LONGEST_FEED_UNITS, feed.longestMoveMm * feed.feedPerMm);
  if (units > longestUnits + FEED_ROUNDING_UNITS) {
    return `A feed of ${units.toFixed(4)} is longer than ${longestUnits.toFixed(4)}.`;
  }
  if (move.unitsPerMin > feed.speedMmS * feed.feedPerMm * 60 + 1e-6) {
    return `F${move.unitsPerMin} is faster than ${feed.speedMmS} mm/s of wire.`;
  }
  return null;
}

/** Why this much wire may not be the trim. */
export function trimProblem({ feed }: Profile, fedUnits: number): string | null {
  return Math.abs(fedUnits - feed.trimMm * feed.feedPerMm) <= FEED_ROUNDING_UNITS
    ? null
    : `The trim feeds ${(fedUnits / feed.feedPerMm).toFixed(3)} mm, not ${feed.trimMm} mm.`;
}

/** Why this much wire may not be a piece. */
export function pieceProblem({ feed }: Profile, fedUnits: number): string | null {
  const shortest = feed.shortestPieceMm * feed.feedPerMm - FEED_ROUNDING_UNITS;
  const longest = feed.longestPieceMm * feed.feedPerMm + FEED_ROUNDING_UNITS;
  if (fedUnits >= shortest && fedUnits <= longest) return null;
  const lengthMm = (fedUnits / feed.feedPerMm).toFixed(3);
  return `A piece of ${lengthMm} mm is outside ${feed.shortestPieceMm} to ${feed.longestPieceMm} mm.`;
}
