import type { House } from '@/scripts/house/house.mjs';
import { strikeHouse } from './house-faults';
import { houseFaultsOf, RIG_FAULTS, scheduleOf } from './plan';
import { runSchedule, type Outcome } from './wave';
import { BENCH_KINDS, Workshop } from './workshop';

/** A spool lasts so many waves. */
const WAVES_PER_SPOOL = 30;
const AGENT = ['scripts/run.mjs', 'agent/main.ts', '--'] as const;

export interface Grounds {
  /** Running, without demo. */
  house: House;
  /** For everything that the benches keep. */
  folder: string;
  /** The checkout, from which agents are started. */
  repo: string;
  say: (text: string) => void;
}

export interface Wanted extends Grounds {
  schedules: number;
  /** The first seed; the next ones follow it. */
  seed: number;
  onOutcome: (outcome: Outcome) => void;
}

/** Opens a workshop with these benches in the house, and closes it whatever happens. */
export async function inWorkshop<Result>(
  { house, folder, repo, say }: Grounds,
  benches: Parameters<typeof Workshop.open>[1],
  work: (workshop: Workshop) => Promise<Result>,
): Promise<Result> {
  const databaseUrl = house.env.DATABASE_URL ?? '';
  const workshop = await Workshop.open({ url: house.url, databaseUrl, folder, repo }, benches);
  try {
    if (!workshop.ownDisks) say('No small disk can be mounted here: no disk is filled up.');
    return await work(workshop);
  } finally {
    await workshop.close();
  }
}

/** Runs schedules by seed on a house, as many rigs at a time as there are kinds; a seed always meets the same kind. */
export function runFaults(wanted: Wanted): Promise<Outcome[]> {
  const { schedules, seed } = wanted;
  const seeds = Array.from({ length: schedules }, (_, index) => seed + index);
  const kinds = seeds.slice(0, BENCH_KINDS).map((own) => own % BENCH_KINDS);
  const benches = kinds.map((kind) => ({ kind, agentProgram: AGENT }));
  return inWorkshop(wanted, benches, async (workshop) => {
    const outcomes: Outcome[] = [];
    for (let wave = 0; wave * BENCH_KINDS < schedules; wave += 1) {
      if (wave % WAVES_PER_SPOOL === WAVES_PER_SPOOL - 1) {
        await Promise.all(workshop.benches.map((bench) => workshop.loadNewSpool(bench)));
      }
      const own = seeds.slice(wave * BENCH_KINDS, (wave + 1) * BENCH_KINDS);
      outcomes.push(...(await runWave(wanted, workshop, own)));
    }
    return outcomes;
  });
}

/** One schedule on each bench, while the house is struck by what their first seed says. */
async function runWave(
  { house, onOutcome, say }: Wanted,
  workshop: Workshop,
  seeds: readonly number[],
): Promise<Outcome[]> {
  const strikes = strikeHouse(house, houseFaultsOf(seeds[0] ?? 0), say);
  const outcomes = await Promise.all(
    seeds.map(async (seed) => {
      const bench = workshop.benches.find(({ kind }) => kind === seed % BENCH_KINDS);
      if (!bench) throw new Error(`No bench is of the kind that seed ${seed} wants`);
      const outcome = await runSchedule(workshop, bench, scheduleOf(seed, faultsOn(workshop)), strikes.begin);
      onOutcome(outcome);
      return outcome;
    }),
  );
  await strikes.over;
  return outcomes;
}

/** The kinds of fault that this computer can bring about. */
export function faultsOn({ ownDisks }: Workshop) {
  return RIG_FAULTS.filter((kind) => kind !== 'disk-full' || ownDisks);
}
