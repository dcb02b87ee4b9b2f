import { afterEach, describe, expect, it } from 'vitest';
import type { RunProgram } from '@/lib/protocol/pairing';
import { AgentBench, benchProfile, PERSON } from '../support/agent-bench';

const LENGTH_MM = 40;
const PIECES = 5;
/** The piece in which the agent dies. */
const DEADLY = 3;

let bench: AgentBench | null = null;

afterEach(async () => {
  await bench?.close();
  bench = null;
});

/** A moment in the cycle of piece 3, and whether its cut was commanded and not confirmed by then. */
interface Moment {
  name: string;
  /** `unless written`: the rig's word came, and was being written down when the agent died. */
  open: boolean | 'unless written';
  /** Kills the agent when the moment has come; resolves when it is gone. */
  kill: (bench: AgentBench) => Promise<unknown>;
}

/** Kills when the rig is about to take the first such line of the deadly piece. */
function onLine(pattern: RegExp, afterClosings = DEADLY) {
  return (at: AgentBench) =>
    new Promise((resolve, reject) => {
      at.onLine = (line) => {
        // The trim closes the jaws too.
        if (at.closings().length < afterClosings || !pattern.test(line)) return;
        at.onLine = () => undefined;
        at.kill().then(resolve, reject);
      };
    });
}

/** The feed is done and its ok never comes: the agent knows that it sent it, nothing else. */
function afterFeed(at: AgentBench): Promise<unknown> {
  return new Promise((resolve, reject) => {
    at.onLine = (line) => {
      if (at.closings().length < DEADLY || !/^G1 E40/.test(line)) return;
      at.onLine = () => undefined;
      const muted = at.rig.control({ do: 'ok', fault: 'swallow', count: 1 });
      muted
        .then(() => standstill(at))
        .then(() => at.kill())
        .then(resolve, reject);
    };
  });
}

async function standstill(at: AgentBench): Promise<void> {
  // The line itself is taken right after the listener: let it be.
  await new Promise((resolve) => setImmediate(resolve));
  while (at.rig.snapshot().moving) await new Promise((resolve) => setImmediate(resolve));
}

function afterCut(at: AgentBench): Promise<unknown> {
  return new Promise((resolve, reject) => {
    at.onTally = ({ kind }) => {
      if (kind !== 'closing' || at.closings().length !== DEADLY + 1) return;
      at.onTally = () => undefined;
      at.kill().then(resolve, reject);
    };
  });
}

const MOMENTS: Moment[] = [
  { name: 'the feed was sent', open: false, kill: onLine(/^G1 E40/) },
  { name: 'the feed was done', open: false, kill: afterFeed },
  { name: 'the cut was sent', open: true, kill: onLine(/^G1 Z5\.5/) },
  { name: 'the cut was done', open: true, kill: afterCut },
  { name: 'the register was written', open: true, kill: onLine(/^G92 Y170003/) },
  { name: 'the return was sent', open: 'unless written', kill: onLine(/^G1 Z8/, DEADLY + 1) },
];

async function startAndDie(
  moment: Moment,
  resetsOnOpen: boolean,
): Promise<{ at: AgentBench; run: RunProgram }> {
  const profile = { ...benchProfile, serial: { ...benchProfile.serial, resetsOnOpen } };
  const at = await AgentBench.open({ profile });
  bench = at;
  at.startAgent();
  const run = at.makeRun({ pieces: PIECES, lengthMm: LENGTH_MM });
  const dead = moment.kill(at);
  await at.start(run);
  await dead;
  at.startAgent();
  return { at, run };
}

/** Nothing may move before a person said so: the closings after the restart and until now. */
async function heldAfterRestart(at: AgentBench) {
  await at.told('agent-started', 2);
  return at.until(
    ({ runner, port, signals }) => runner === 'held' && port === 'open' && signals.guard.reading === 'closed',
    'the run is held',
  );
}

function goodClosings(at: AgentBench): number {
  return at.closings().filter(({ wireMm, severed }) => severed && Math.abs(wireMm - LENGTH_MM) <= 0.05)
    .length;
}

async function finish(at: AgentBench, run: RunProgram): Promise<void> {
  await at.goOn(run);
  await at.until(({ runner }) => runner === 'tray-full', 'the run ends');
  await at.told('run-ended', 1);
}

/** Pieces counted by the rig's word or by a person, each once. */
function counted(at: AgentBench): number[] {
  const settled = at.desk.said('piece-settled').filter(({ answer }) => answer === 'count');
  return [...at.desk.said('piece-cut'), ...settled].map(({ piece }) => piece).sort((a, b) => a - b);
}

const ALL = Array.from({ length: PIECES }, (_, index) => index + 1);

describe('law 2: the rig remembers, when an agent is killed and started again at a port that stays', () => {
  it.each(MOMENTS)('loses and doubles nothing when $name', async (moment) => {
    const { at, run } = await startAndDie(moment, false);
    const closings = at.closings().length;
    const report = await heldAfterRestart(at);
    expect(report.holdReason).toBe('agent-restarted');
    expect(at.desk.said('piece-doubted')).toEqual([]);
    // What was in the planner may end; nothing else moves without a person.
    expect(at.closings().length - closings).toBeLessThanOrEqual(1);

    await finish(at, run);
    expect(counted(at)).toEqual(ALL);
    expect(goodClosings(at)).toBe(PIECES);
    // One trim in all: it went on from exactly that step.
    expect(at.closings()).toHaveLength(PIECES + 1);
    expect(at.desk.said('trim-cut')).toHaveLength(1);
  });
});

describe('laws 2 and 3: an agent killed and started again at a port that resets the rig', () => {
  it.each(MOMENTS)(
    'doubts the piece only if its cut was commanded and not confirmed, when $name',
    async (moment) => {
      const { at, run } = await startAndDie(moment, true);
      const report = await heldAfterRestart(at);
      // Restarted, then what became of the rig meanwhile: all events of the second life's beginning.
      await at.told('run-held', 2);
      const written = at.desk.said('piece-cut').some(({ piece }) => piece === DEADLY);
      const open = moment.open === 'unless written' ? !written : moment.open;
      expect(report.holdReason).toBe(open ? 'doubt' : 'firmware-reset');
      expect(at.desk.said('piece-doubted').map(({ piece }) => piece)).toEqual(open ? [DEADLY] : []);

      if (open) {
        const answer = goodClosings(at) === DEADLY ? 'count' : 'discard';
        const settled = await at.desk.give({
          kind: 'settle-piece',
          ...at.envelope(),
          runId: run.runId,
          answer,
        });
        expect(settled.outcome).toBe('done');
        await at.desk.until(() => at.desk.said('piece-settled').length === 1, 'the answer is told');
        expect(at.desk.said('piece-settled')[0]?.personId).toBe(PERSON);
      }
      await finish(at, run);
      expect(counted(at)).toEqual(ALL);
      expect(goodClosings(at)).toBe(PIECES);
      expect(at.desk.said('trim-cut')).toHaveLength(2);
    },
  );
});
