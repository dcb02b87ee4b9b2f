import type { Outcome } from './wave';

const TRACE_MOST = 60;

/** Whether a schedule ended with its batch done and nothing to be said against it. */
export function isHeld({ done, problems }: Outcome): boolean {
  return done && problems.length === 0;
}

/** What went wrong in one schedule, with the end of its trace; null when it held. */
export function describeFailure(outcome: Outcome): string | null {
  if (isHeld(outcome)) return null;
  const { schedule, problems, trace } = outcome;
  const { seed, pieces, lengthMm } = schedule;
  const shown = trace.slice(-TRACE_MOST);
  const left = trace.length - shown.length;
  return [
    `SEED ${seed}: ${pieces} pieces of ${lengthMm} mm`,
    ...problems.map((problem) => `  ${problem}`),
    ...(left > 0 ? [`  … ${left} lines before`] : []),
    ...shown.map((line) => `  ${line}`),
  ].join('\n');
}

function sum(outcomes: readonly Outcome[], of: (outcome: Outcome) => number): number {
  return outcomes.reduce((total, outcome) => total + of(outcome), 0);
}

function tallyUp(names: readonly string[]): Record<string, number> {
  const counts: Record<string, number> = {};
  for (const name of names) counts[name] = (counts[name] ?? 0) + 1;
  return counts;
}

/** The last line, the figures for a file, and whether every schedule held. */
export function summaryOf(outcomes: readonly Outcome[]) {
  const figures = {
    schedules: outcomes.length,
    lost: sum(outcomes, ({ lost }) => lost),
    doubled: sum(outcomes, ({ doubled }) => doubled),
    untold: sum(outcomes, ({ untold }) => untold),
    moves: sum(outcomes, ({ moves }) => moves),
    notDone: outcomes.filter(({ done }) => !done).length,
    faults: tallyUp(outcomes.flatMap(({ struck }) => struck)),
    holds: tallyUp(
      outcomes.flatMap(({ holds: told }) =>
        Object.entries(told).flatMap(([reason, count]) => Array.from({ length: count }, () => reason)),
      ),
    ),
    failedSeeds: outcomes.filter((outcome) => !isHeld(outcome)).map(({ schedule }) => schedule.seed),
    msPerSchedule: Math.round(sum(outcomes, ({ tookMs }) => tookMs) / Math.max(1, outcomes.length)),
  };
  const { schedules, lost, doubled, untold, moves } = figures;
  return {
    figures,
    line: `schedules ${schedules}, lost ${lost}, doubled ${doubled}, untold ${untold}, moves ${moves}`,
    holds: outcomes.length > 0 && outcomes.every(isHeld),
  };
}
