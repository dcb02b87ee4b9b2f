import { setTimeout as pause } from 'node:timers/promises';
import type { Profile } from '@/lib/program/profile';
import { guardDelayS, POLL_EVERY_MS } from '@/lib/program/guard';
import type { RigFault, RigFaultKind } from './fault';
import { judge, type Verdict } from './judge';
import { Person } from './people';
import type { Schedule } from './plan';
import { RIG_SPEED } from './stand';
import type { Bench, Workshop } from './workshop';

/** For what hangs, not for a computer that is busy with something else. */
const BATCH_MOST_MS = 180_000;
/** Line and agent on a busy computer, on top of what the profile says. */
const READING_MS = 500;
const BETWEEN_LOOKS_MS = 150;
/** What the agent has not told when its run is over comes with its next upload. */
const LAST_EVENTS_MS = 300;

export interface Outcome extends Verdict {
  schedule: Schedule;
  done: boolean;
  tookMs: number;
  struck: RigFaultKind[];
  trace: string[];
}

/** Runs one schedule on one bench, from the order to the last bag, and judges it. */
export async function runSchedule(
  workshop: Workshop,
  bench: Bench,
  schedule: Schedule,
  onBegin: () => void,
): Promise<Outcome> {
  const { stand, profile } = bench;
  const fromMs = Date.now();
  const trace: string[] = [];
  const note = (text: string) => trace.push(`${String(Date.now() - fromMs).padStart(6)} ms  ${text}`);
  await stand.heal();
  const tallyFrom = stand.tally.length;
  const feedPerMm = profile.feed.feedPerMm;
  const person = new Person({
    stand,
    now: workshop.now,
    glance: () => workshop.glance(stand.rigId),
    orderOf: (runId) => workshop.orderOf(runId, feedPerMm),
    trace: note,
  });
  const struck: RigFaultKind[] = [];
  const left = [...schedule.strikes];
  stand.watch((count) => {
    if (count === 1) onBegin();
    for (let next = left[0]; next && next.atLine <= count; next = left[0]) {
      left.shift();
      struck.push(next.fault.kind);
      note(`FAULT at line ${count}: ${JSON.stringify(next.fault)}`);
      strike(bench, person, next.fault).catch((error: unknown) => note(`fault failed: ${String(error)}`));
    }
  });
  const attending = person.attend();
  const batchId = await untilDone(() =>
    workshop.order(bench, schedule.pieces, schedule.lengthMm, `Seed ${schedule.seed}`),
  );
  const done = await untilBagged(workshop, batchId, schedule.pieces, fromMs + BATCH_MOST_MS);
  stand.watch(() => undefined);
  person.close();
  await attending;
  if (done) await pause(LAST_EVENTS_MS);
  const verdict = judge({
    runs: await untilDone(() => workshop.runsOf(batchId, feedPerMm)),
    tally: stand.tally.slice(tallyFrom),
    movesAtMs: stand.movesSince(fromMs),
    permits: person.permits,
    workHolds: person.workHolds,
    guardDelayMs: guardDelayMs(profile, schedule.lengthMm),
    wireTaken: struck.includes('wire-out'),
    faults: struck.length,
  });
  if (!done) verdict.problems.push(`not done after ${BATCH_MOST_MS / 1_000} s`);
  return { ...verdict, schedule, done, tookMs: Date.now() - fromMs, struck, trace };
}

/** The rig moves faster than a real one; the agent reads the guard by the wall clock. */
function guardDelayMs(profile: Profile, lengthMm: number): number {
  const delayMs = (guardDelayS(profile, lengthMm) ?? 0) * 1_000;
  return POLL_EVERY_MS + delayMs / RIG_SPEED + READING_MS;
}

/** Services fail while the house is struck: they are asked again. */
async function untilDone<Value>(call: () => Promise<Value>): Promise<Value> {
  const giveUpMs = Date.now() + BATCH_MOST_MS;
  for (;;) {
    try {
      return await call();
    } catch (error) {
      if (Date.now() > giveUpMs) throw error;
      await pause(BETWEEN_LOOKS_MS);
    }
  }
}

async function untilBagged(
  workshop: Workshop,
  batchId: string,
  pieces: number,
  giveUpMs: number,
): Promise<boolean> {
  while (Date.now() < giveUpMs) {
    const { bagged, active } = await untilDone(() => workshop.progress(batchId));
    if (bagged >= pieces && active === 0) return true;
    await pause(BETWEEN_LOOKS_MS);
  }
  return false;
}

async function forAWhile(
  ms: number,
  begin: () => Promise<unknown>,
  end: () => Promise<unknown>,
): Promise<void> {
  await begin();
  await pause(ms);
  await end();
}

async function strike({ stand }: Bench, person: Person, fault: RigFault): Promise<void> {
  const { relay } = stand;
  switch (fault.kind) {
    case 'agent-killed':
      return stand.killAgent(fault.downMs);
    case 'rig-power':
      return forAWhile(
        fault.offMs,
        () => stand.control({ do: 'power', on: false }),
        () => stand.control({ do: 'power', on: true }),
      );
    case 'board-reset':
      await stand.control({ do: 'reset' });
      return;
    case 'unplugged':
      return forAWhile(
        fault.forMs,
        () => stand.control({ do: 'usb', plugged: false }),
        () => stand.control({ do: 'usb', plugged: true }),
      );
    case 'noise': {
      const { noise, direction, bytes } = fault;
      await stand.control({ do: 'noise', kind: noise, direction, bytes, probability: 1 });
      return;
    }
    case 'ok-spoilt':
      await stand.control({ do: 'ok', fault: fault.fault, count: 1 });
      return;
    case 'mute':
      await stand.control({ do: 'mute', ms: fault.forMs });
      return;
    case 'network-cut':
      return relay.cut(fault.forMs);
    case 'network-slow':
      return relay.slow(fault.forMs, fault.delayMs);
    case 'network-twice':
      return relay.twice(fault.calls);
    case 'network-late':
      return relay.late(fault.calls);
    case 'answer-lost':
      return relay.loseAnswers(fault.calls);
    case 'disk-full':
      stand.fillDisk();
      await pause(fault.forMs);
      return stand.freeDisk();
    case 'guard':
      return forAWhile(
        fault.openMs,
        () => stand.control({ do: 'guard', open: true }),
        () => stand.control({ do: 'guard', open: false }),
      );
    case 'wire-out':
      return forAWhile(
        fault.forMs,
        () => stand.control({ do: 'wire', out: true }),
        () => stand.control({ do: 'wire', out: false }),
      );
    case 'pause':
    case 'stop':
    case 'misfeed':
    case 'work-hold':
      return person.will(fault);
  }
}
