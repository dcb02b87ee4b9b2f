import { writeFileSync } from 'node:fs';
import { runFaults, type Grounds, type Wanted } from './run-faults';
import { runMutants } from './run-mutants';
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

/** Runs every mutant of the agent on its seeds. @returns whether each was seen */
export async function mainMutants(grounds: Grounds): Promise<boolean> {
  const unseen = await runMutants(grounds);
  grounds.say(unseen.length === 0 ? 'Every mutant was seen.' : `Not seen: ${unseen.join('; ')}`);
  return unseen.length === 0;
}
