import { MUTANTS } from './mutants';
import { bundleMutant } from './mutate';
import { scheduleOf } from './plan';
import { faultsOn, inWorkshop, type Grounds } from './run-faults';
import { runSchedule, type Outcome } from './wave';
import { BENCH_KINDS } from './workshop';

/** A mutant that only takes long, or never ends, has not given itself away. */
function isSeen({ lost, doubled, untold, moves }: Outcome): boolean {
  return lost + doubled + untold + moves > 0;
}

/** @returns names and seeds of mutants that no schedule gave away: the harness, or the seed, is blind to them */
export async function runMutants(grounds: Grounds, wanted = MUTANTS): Promise<string[]> {
  const trials = await Promise.all(
    wanted.flatMap((mutant) =>
      mutant.seeds.map(async (seed) => ({ mutant, seed, bundle: await bundleMutant(mutant, grounds.repo) })),
    ),
  );
  const benches = trials.map(({ seed, bundle }) => ({ kind: seed % BENCH_KINDS, agentProgram: [bundle] }));
  return inWorkshop(grounds, benches, async (workshop) => {
    const unseen = await Promise.all(
      trials.map(async ({ mutant, seed }, index) => {
        const bench = workshop.benches[index];
        if (!bench) throw new Error('There are fewer benches than trials');
        const outcome = await runSchedule(
          workshop,
          bench,
          scheduleOf(seed, faultsOn(workshop)),
          () => undefined,
        );
        const name = `${mutant.name}, seed ${seed}`;
        if (!isSeen(outcome)) grounds.say(outcome.trace.join('\n'));
        grounds.say(`${name}: ${isSeen(outcome) ? outcome.problems.join('; ') : 'NOT SEEN'}`);
        return isSeen(outcome) ? [] : [name];
      }),
    );
    return unseen.flat();
  });
}
