import type { BackoffOptions } from 'bullmq';

/** The longest rest: a mail server that is back is asked within this. */
const REST_MOST_MS = 60_000;
/** Rests differ by up to half, so that what failed together does not come back together. */
const JITTER = 0.5;

/**
 * ms until a failed job is tried again: its own `delay`, doubled with each attempt up to a minute, less up to half of
 * it by `chance` (0 to 1).
 */
export function restMs(
  attempt: number,
  backoff: number | BackoffOptions | undefined,
  chance: number,
): number {
  const firstMs = typeof backoff === 'object' ? (backoff.delay ?? 0) : (backoff ?? 0);
  const fullMs = Math.min(firstMs * 2 ** (attempt - 1), REST_MOST_MS);
  return Math.round(fullMs * (1 - JITTER * chance));
}
