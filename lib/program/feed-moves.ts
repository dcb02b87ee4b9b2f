import type { Profile } from './profile';

/** Firmware refuses a feed over 200 mm and goes on as if it had fed; one family's limit is 160 (protocol.md 0.2). */
const LONGEST_FEED_UNITS = 150;

/** Feed targets are whole ten-thousandths, so a piece's moves add up to its length without drift. */
export const FEED_DECIMALS = 4;
const TICKS_PER_UNIT = 10 ** FEED_DECIMALS;

/**
 * The absolute feed coordinates (E units) that feed `lengthMm` of wire from zero, in moves of equal size that
 * are neither longer than the profile's longest move nor than 150 E units.
 */
export function feedTargets(feed: Profile['feed'], lengthMm: number): number[] {
  const totalTicks = Math.round(lengthMm * feed.feedPerMm * TICKS_PER_UNIT);
  const longestUnits = Math.min(LONGEST_FEED_UNITS, feed.longestMoveMm * feed.feedPerMm);
  // A hair is added so that 0.1 · 3 and its like do not lose a whole tick to binary fractions.
  const longestTicks = Math.max(1, Math.floor(longestUnits * TICKS_PER_UNIT + 1e-6));
  const moves = Math.max(1, Math.ceil(totalTicks / longestTicks));
  return Array.from(
    { length: moves },
    (_, index) => Math.round((totalTicks * (index + 1)) / moves) / TICKS_PER_UNIT,
  );
}
