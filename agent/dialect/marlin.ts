import type { Dialect } from './dialect';
import { readReply } from './reply';

/** Marlin 1.1 and 2, and its forks: an ok comes when the line was carried out, for a move when it is planned. */
export const marlin: Dialect = {
  name: 'main family',
  longestFeedUnits: 200,
  // A 32 bit count: a line a millisecond reaches its end after 24 days, a run after hours at most.
  numbersModulo: 2 ** 31,
  acksOnReceipt: false,
  read: readReply,
  linesOf: (command) => [command],
};
