const FIRST_MS = 100;
const CEILING_MS = 10_000;
/** What only a person can mend is tried again this rarely. */
const SLOW_MS = 30_000;

/**
 * How long to wait before the next try: doubling, at most 10 s, and spread so that a row of agents does not come
 * back in step. @param tries how many failed in a row, from 1 @param random in [0, 1) @returns ms
 */
export function backOffMs(tries: number, random: number): number {
  const full = Math.min(CEILING_MS, FIRST_MS * 2 ** Math.min(tries - 1, 20));
  return full * (0.5 + 0.5 * random);
}

/** @param random in [0, 1) @returns ms, between 30 s and 36 s */
export function slowBackOffMs(random: number): number {
  return SLOW_MS * (1 + 0.2 * random);
}
