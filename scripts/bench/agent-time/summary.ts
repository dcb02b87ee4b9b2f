import { mean, quantile, rounded } from '../figures';
import type { BenchResult } from '../result';
import type { AddedTime } from './added-time';
import type { TimedRun } from './cut-run';

const GOAL_MS = 3;

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}

function describeRun({ lengthMm, pieces, wholeMs, idealMs }: TimedRun, addedMs: readonly number[]) {
  return {
    lengthMm,
    pieces,
    addedMsP50: rounded(quantile(addedMs, 0.5)),
    addedMsP95: rounded(quantile(addedMs, 0.95)),
    idealMsPerPiece: rounded(mean(idealMs)),
    wholeMsPerPiece: rounded(mean(wholeMs)),
    wholeOverIdeal: sum(wholeMs) / sum(idealMs),
  };
}

/** Before which lines the time is spent: of the pieces that had such a line, ms. */
function describeLines(added: readonly AddedTime[]) {
  const kinds = [...new Set(added.flatMap(({ byLine }) => Object.keys(byLine)))];
  return kinds.map((line) => {
    const spentMs = added.flatMap(({ byLine }) => byLine[line] ?? []);
    const figures = { msP50: rounded(quantile(spentMs, 0.5)), msP95: rounded(quantile(spentMs, 0.95)) };
    return { line, pieces: spentMs.length, ...figures };
  });
}

/**
 * The figures of some runs and of what the agent added to each of their pieces, in order.
 * @throws Error when not every piece was timed
 */
export function summarise(runs: readonly TimedRun[], added: readonly AddedTime[]): BenchResult {
  const addedMs = added.map(({ totalMs }) => totalMs);
  const wanted = sum(runs.map(({ pieces }) => pieces));
  if (addedMs.length !== wanted) throw new Error(`${addedMs.length} of ${wanted} pieces were timed`);
  const value = quantile(addedMs, 0.95);
  const ideal = runs.flatMap(({ idealMs }) => idealMs);
  const whole = runs.flatMap(({ wholeMs }) => wholeMs);
  const baseline = mean(ideal);
  const starts = runs.map((_run, index) => sum(runs.slice(0, index).map(({ pieces }) => pieces)));
  return {
    name: 'agent-time',
    value: rounded(value),
    unit: 'ms a piece, p95',
    goal: GOAL_MS,
    baseline: rounded(baseline),
    ratio: value / baseline,
    details: {
      measured: 'from an answer handed to the agent to its next line handed to the port, summed over a piece',
      baselineIs: 'ideal motion of the virtual rig for one piece, mean',
      p50Ms: rounded(quantile(addedMs, 0.5)),
      p95Ms: rounded(value),
      p99Ms: rounded(quantile(addedMs, 0.99)),
      mostMs: rounded(Math.max(...addedMs)),
      wholeOverIdeal: sum(whole) / sum(ideal),
      byLength: runs.map((run, index) => {
        const from = starts[index] ?? 0;
        return describeRun(run, addedMs.slice(from, from + run.pieces));
      }),
      beforeLine: describeLines(added),
    },
  };
}
