import { seededRandom, type Random } from '@/agent/virtual/mechanics/random';
import { MISFEED_CAUSES } from '@/lib/fleet/run';
import type { HouseFault, RigFault, RigFaultKind } from './fault';

/** A fault, and the line to the rig (from 1, counted from the first of the program) before which it strikes. */
export interface Strike {
  atLine: number;
  fault: RigFault;
}

/** One seeded schedule: what a rig is asked to cut, and what befalls it meanwhile. */
export interface Schedule {
  seed: number;
  pieces: number;
  lengthMm: number;
  strikes: readonly Strike[];
}

const FAULTS_MOST = 4;
const PIECES = [6, 12] as const;
const LENGTH_MM = [35, 90] as const;
/** Preamble, home, trim and register before the first piece; lines of a piece; both as the generator writes them. */
const LINES_BEFORE = 22;
const LINES_A_PIECE = 6;

function between(random: Random, least: number, most: number): number {
  return least + Math.floor(random() * (most - least + 1));
}

function pick<Value>(random: Random, values: readonly Value[]): Value {
  const value = values[Math.floor(random() * values.length)];
  if (value === undefined) throw new RangeError('nothing to pick from');
  return value;
}

const MAKERS: Record<RigFaultKind, (random: Random) => RigFault> = {
  'agent-killed': (random) => ({ kind: 'agent-killed', downMs: between(random, 0, 600) }),
  'rig-power': (random) => ({ kind: 'rig-power', offMs: between(random, 50, 600) }),
  'board-reset': () => ({ kind: 'board-reset' }),
  unplugged: (random) => ({ kind: 'unplugged', forMs: between(random, 50, 600) }),
  noise: (random) => ({
    kind: 'noise',
    noise: pick(random, ['flip', 'drop', 'double', 'pair']),
    direction: pick(random, ['in', 'out']),
    bytes: between(random, 1, 3),
  }),
  'ok-spoilt': (random) => ({ kind: 'ok-spoilt', fault: pick(random, ['swallow', 'double', 'split']) }),
  mute: (random) => ({ kind: 'mute', forMs: between(random, 50, 700) }),
  'network-cut': (random) => ({ kind: 'network-cut', forMs: between(random, 100, 900) }),
  'network-slow': (random) => ({
    kind: 'network-slow',
    forMs: between(random, 300, 1_000),
    delayMs: between(random, 20, 250),
  }),
  'network-twice': (random) => ({ kind: 'network-twice', calls: between(random, 1, 6) }),
  'network-late': (random) => ({ kind: 'network-late', calls: between(random, 1, 4) }),
  'answer-lost': (random) => ({ kind: 'answer-lost', calls: between(random, 1, 4) }),
  'disk-full': (random) => ({ kind: 'disk-full', forMs: between(random, 100, 700) }),
  guard: (random) => ({ kind: 'guard', openMs: between(random, 100, 500) }),
  'wire-out': (random) => ({ kind: 'wire-out', forMs: between(random, 100, 500) }),
  pause: () => ({ kind: 'pause' }),
  stop: () => ({ kind: 'stop' }),
  misfeed: (random) => ({ kind: 'misfeed', cause: pick(random, MISFEED_CAUSES) }),
  'work-hold': (random) => ({
    kind: 'work-hold',
    forMs: between(random, 50, 400),
    pull: pick(random, ['motors', 'cable', 'nothing']),
  }),
};

export const RIG_FAULTS = Object.keys(MAKERS) as readonly RigFaultKind[];

/** The schedule of a seed; the same for ever. `kinds`: those that this computer can bring about. */
export function scheduleOf(seed: number, kinds: readonly RigFaultKind[] = RIG_FAULTS): Schedule {
  const random = seededRandom(seed);
  // Neighbouring seeds begin alike.
  for (let turn = 0; turn < 8; turn += 1) random();
  const pieces = between(random, ...PIECES);
  const lengthMm = between(random, ...LENGTH_MM);
  const lines = LINES_BEFORE + pieces * LINES_A_PIECE;
  const count = between(random, 1, FAULTS_MOST);
  const strikes = Array.from({ length: count }, () => {
    const kind = pick(random, RIG_FAULTS);
    return { atLine: between(random, 1, lines), fault: MAKERS[kind](random) };
  });
  return {
    seed,
    pieces,
    lengthMm,
    strikes: strikes
      .filter(({ fault }) => kinds.includes(fault.kind))
      .sort((one, other) => one.atLine - other.atLine),
  };
}

/** What befalls the house while a wave of schedules runs, with the time after the wave's first line, ms. */
export function houseFaultsOf(seed: number): { afterMs: number; fault: HouseFault }[] {
  const random = seededRandom(seed + 500_000_003);
  for (let turn = 0; turn < 8; turn += 1) random();
  const count = between(random, 0, 2);
  const kinds = [
    'server-killed',
    'worker-killed',
    'redis-emptied',
    'redis-restarted',
    'database-restarted',
  ] as const;
  return Array.from({ length: count }, () => ({
    afterMs: between(random, 0, 3_000),
    fault: { kind: pick(random, kinds) },
  })).sort((one, other) => one.afterMs - other.afterMs);
}
