import { setTimeout as pause } from 'node:timers/promises';
import { Redis } from 'ioredis';
import type { House } from '@/scripts/house/house.mjs';
import type { HouseFault } from './fault';
import { houseFaultsOf, RIG_FAULTS, scheduleOf } from './plan';
import { runSchedule, type Outcome } from './wave';
import { Workshop } from './workshop';

/** Schedules at a time; as many rigs. */
const BENCHES = 8;
/** A spool lasts so many waves. */
const WAVES_PER_SPOOL = 30;

export interface Wanted {
  /** Running, without demo. */
  house: House;
  /** For everything that the benches keep. */
  folder: string;
  /** The checkout, from which agents are started. */
  repo: string;
  schedules: number;
  /** The first seed; the next ones follow it. */
  seed: number;
  onOutcome: (outcome: Outcome) => void;
  say: (text: string) => void;
}

/** Runs schedules by seed on a house, eight rigs at a time. */
export async function runFaults(wanted: Wanted): Promise<Outcome[]> {
  const { house, folder, repo, schedules, say } = wanted;
  const outcomes: Outcome[] = [];
  const benches = Math.min(BENCHES, schedules);
  const databaseUrl = house.env.DATABASE_URL ?? '';
  const workshop = await Workshop.open({ url: house.url, databaseUrl, folder, repo }, benches);
  try {
    if (!workshop.ownDisks) say('No small disk can be mounted here: no disk is filled up.');
    for (let first = 0, wave = 1; first < schedules; first += benches, wave += 1) {
      if (wave % WAVES_PER_SPOOL === 0) {
        await Promise.all(workshop.benches.map((bench) => workshop.loadNewSpool(bench)));
      }
      outcomes.push(...(await runWave(wanted, workshop, first)));
    }
  } finally {
    await workshop.close();
  }
  return outcomes;
}

/** The schedules from `first` on, one on each bench, while the house is struck by what their first seed says. */
async function runWave(
  { house, schedules, seed, onOutcome, say }: Wanted,
  workshop: Workshop,
  first: number,
): Promise<Outcome[]> {
  const kinds = RIG_FAULTS.filter((kind) => kind !== 'disk-full' || workshop.ownDisks);
  const strikes = strikeHouse(house, houseFaultsOf(seed + first), say);
  const benches = workshop.benches.slice(0, schedules - first);
  const outcomes = await Promise.all(
    benches.map(async (bench, index) => {
      const schedule = scheduleOf(seed + first + index, kinds);
      const outcome = await runSchedule(workshop, bench, schedule, strikes.begin);
      onOutcome(outcome);
      return outcome;
    }),
  );
  await strikes.over;
  return outcomes;
}

/** The house's faults of one wave, told from its first line on. */
function strikeHouse(house: House, faults: ReturnType<typeof houseFaultsOf>, say: (text: string) => void) {
  let begin: () => void = () => undefined;
  const begun = new Promise<void>((resolve) => {
    begin = resolve;
  });
  const over = begun.then(async () => {
    let passedMs = 0;
    for (const { afterMs, fault } of faults) {
      await pause(afterMs - passedMs);
      passedMs = afterMs;
      say(`house: ${fault.kind}`);
      await strike(house, fault);
    }
  });
  return { begin: () => begin(), over };
}

async function strike(house: House, { kind }: HouseFault): Promise<void> {
  switch (kind) {
    case 'server-killed':
      return house.child('web').crash();
    case 'worker-killed':
      return house.child('worker').crash();
    case 'redis-restarted':
      return house.child('Redis').crash();
    case 'database-restarted':
      return house.child('PostgreSQL').crash();
    case 'redis-emptied': {
      const redis = new Redis(house.env.REDIS_URL ?? '', { maxRetriesPerRequest: 1 });
      redis.on('error', () => undefined);
      try {
        await redis.flushall();
      } finally {
        redis.disconnect();
      }
    }
  }
}
