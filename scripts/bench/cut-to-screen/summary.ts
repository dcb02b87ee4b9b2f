import { quantile, rounded } from '../figures';
import type { BenchResult } from '../result';
import type { PieceSeen, Sighting } from './match';

const GOAL_MS = 250;
const PIECES_LEAST = 100;

export interface Measured {
  onScreen: readonly PieceSeen[];
  withoutBrowser: readonly PieceSeen[];
  relayMs: readonly number[];
  settings: Record<string, number>;
}

function figures(valuesMs: readonly number[]) {
  return {
    p50Ms: rounded(quantile(valuesMs, 0.5)),
    p95Ms: rounded(quantile(valuesMs, 0.95)),
    p99Ms: rounded(quantile(valuesMs, 0.99)),
    mostMs: rounded(Math.max(...valuesMs)),
  };
}

function delays(pieces: readonly PieceSeen[], until: (seen: Sighting) => number | null): number[] {
  return pieces.flatMap(({ seen, closedAtMs }) => {
    const atMs = seen ? until(seen) : null;
    return atMs === null ? [] : [atMs - closedAtMs];
  });
}

/** The figures of one measurement. @throws Error when pieces were not shown at all, or too few were cut */
export function summarise({ onScreen, withoutBrowser, relayMs, settings }: Measured): BenchResult {
  const lost = onScreen.filter(({ seen }) => seen === null);
  if (lost.length > 0) throw new Error(`${lost.length} of ${onScreen.length} pieces were never shown`);
  if (onScreen.length < PIECES_LEAST) throw new Error(`Only ${onScreen.length} pieces were cut`);
  if (relayMs.length === 0) throw new Error('Nothing came through the bare relay');
  const screenMs = figures(delays(onScreen, ({ atMs }) => atMs));
  const relay = figures(relayMs);
  // Where one message told of several pieces, the agent's time is only known of the last.
  const told = onScreen.filter(({ seen, piece }) => seen?.cut === piece);
  return {
    name: 'cut-to-screen',
    value: screenMs.p99Ms,
    unit: 'ms, p99',
    goal: GOAL_MS,
    baseline: relay.p99Ms,
    ratio: screenMs.p99Ms / relay.p99Ms,
    details: {
      measured: "from the jaws' closing in the virtual rig's tally to the event in a signed-in Chromium page",
      baselineIs:
        'a POST over the loopback passed on at once as an event to another page of the same browser, p99',
      pieces: onScreen.length,
      ...screenMs,
      relay: { sent: relayMs.length, ...relay },
      withoutBrowser: figures(delays(withoutBrowser, ({ atMs }) => atMs)),
      onTheWay: {
        agentHasItsAnswer: figures(delays(told, ({ lastPieceAtMs }) => lastPieceAtMs)),
        serverHasReadIt: figures(delays(onScreen, ({ readAtMs }) => readAtMs)),
      },
      ...settings,
    },
  };
}
