import { writeFileSync } from 'node:fs';
import { runFaults, type Wanted } from './run-faults';
import { describeFailure, summaryOf } from './summary';

/** Runs the schedules, tells of each that does not hold, and ends with the line of sums. @returns whether all held */
export async function main(wanted: Omit<Wanted, 'onOutcome'> & { json?: string }): Promise<boolean> {
  const outcomes = await runFaults({
    ...wanted,
    onOutcome: (outcome) => {
      const failure = describeFailure(outcome);
      if (failure !== null) wanted.say(failure);
    },
  });
  const summary = summaryOf(outcomes);
  if (wanted.json !== undefined) writeFileSync(wanted.json, `${JSON.stringify(summary.figures, null, 2)}\n`);
  wanted.say(summary.line);
  return summary.holds;
}
