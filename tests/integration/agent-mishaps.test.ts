import { afterEach, describe, expect, it } from 'vitest';
import type { RunProgram } from '@/lib/protocol/pairing';
import { AgentBench, benchProfile, PERSON, type BenchOptions } from '../support/agent-bench';

const LENGTH_MM = 40;

let bench: AgentBench | null = null;

afterEach(async () => {
  await bench?.close();
  bench = null;
});

async function cutting(
  order: { pieces: number; firstPieces?: number },
  options: BenchOptions = {},
): Promise<{ at: AgentBench; run: RunProgram }> {
  const at = await AgentBench.open(options);
  bench = at;
  at.startAgent();
  const run = at.makeRun({ lengthMm: LENGTH_MM, ...order });
  await at.start(run);
  return { at, run };
}

function pieces(at: AgentBench, count: number): Promise<unknown> {
  return new Promise((resolve) => {
    at.onTally = () => goodClosings(at) >= count && resolve(undefined);
  });
}

function goodClosings(at: AgentBench): number {
  return at.closings().filter(({ wireMm, severed }) => severed && Math.abs(wireMm - LENGTH_MM) <= 0.05)
    .length;
}

async function held(at: AgentBench, reason: string): Promise<void> {
  await at.until(({ runner, holdReason }) => runner === 'held' && holdReason === reason, `held: ${reason}`);
}

async function finish(at: AgentBench, run: RunProgram): Promise<void> {
  await at.goOn(run);
  await ended(at);
  expect(goodClosings(at)).toBe(run.pieces);
}

async function ended(at: AgentBench): Promise<void> {
  await at.until(({ runner }) => runner === 'tray-full', 'the run ends', 50_000);
  await at.told('run-ended', 1);
}

describe('people at the rig', () => {
  it('measure the first pieces before the rest is cut', async () => {
    const { at, run } = await cutting({ pieces: 12, firstPieces: 5 });
    await held(at, 'first-pieces');
    expect(goodClosings(at)).toBe(5);
    expect(at.rig.snapshot().commandedMm.Z).toBe(benchProfile.cutAxis.standbyMm);
    await finish(at, run);
    expect(at.desk.said('run-held')).toHaveLength(1);
    expect(at.closings()).toHaveLength(13);
  });

  it('pause at the end of a piece with the jaws open, and go on without a trim', async () => {
    const { at, run } = await cutting({ pieces: 20 });
    await pieces(at, 3);
    await at.desk.give({ kind: 'pause', ...at.envelope(), runId: run.runId });
    const { piecesCut } = await at.until(({ runner }) => runner === 'paused', 'the run is paused');
    expect(piecesCut).toBe(goodClosings(at));
    expect(at.rig.snapshot().jawsShut).toBe(false);
    expect(await at.told('run-paused', 1)).toMatchObject([{ personId: PERSON }]);
    await finish(at, run);
    expect(at.closings()).toHaveLength(21);
  });

  it('hold a misfeed with its cause, and go on after home and trim', async () => {
    const { at, run } = await cutting({ pieces: 12 });
    await pieces(at, 3);
    await at.desk.give({ kind: 'hold', ...at.envelope(), runId: run.runId, cause: 'curled back' });
    await held(at, 'misfeed');
    expect(await at.told('misfeed', 1)).toMatchObject([
      { cause: 'curled back', foundBy: 'person', personId: PERSON },
    ]);
    await finish(at, run);
    expect(at.desk.said('trim-cut')).toHaveLength(2);
  });

  it('work on a rig that stands still, and only they let it move again', async () => {
    const { at, run } = await cutting({ pieces: 12, firstPieces: 2 });
    await held(at, 'first-pieces');
    await at.goOn(run);
    await pieces(at, 4);
    const answer = await at.desk.give({ kind: 'begin-work-hold', ...at.envelope() });
    expect(answer.outcome).toBe('done');
    const { motionMs } = at.rig.snapshot();
    await held(at, 'work-hold');
    await at.restartAgent();
    await at.told('agent-started', 2);
    await at.until(({ workHold, port }) => workHold && port === 'open', 'the work hold outlives the agent');
    const stranger = { ...at.envelope(), personId: '00000000-0000-4000-8000-0000000000ff' };
    expect(await at.desk.give({ kind: 'end-work-hold', ...stranger })).toMatchObject({ code: 'work-hold' });
    await expect(at.goOn(run)).rejects.toThrow('work-hold');
    expect(at.rig.snapshot().motionMs).toBe(motionMs);
    await at.desk.give({ kind: 'end-work-hold', ...at.envelope() });
    await at.goOn(run);
    await held(at, 'first-pieces');
    await finish(at, run);
    expect(at.desk.said('trim-cut')).toHaveLength(2);
  });

  it('clear the tray before the rig takes another program', async () => {
    const { at, run } = await cutting({ pieces: 2 });
    await ended(at);
    const next = at.makeRun({ pieces: 2, lengthMm: LENGTH_MM, tag: 18 });
    expect(await at.takeProgram(next)).toMatchObject({ code: 'tray-not-cleared' });
    await at.restartAgent();
    await at.told('agent-started', 2);
    await at.ready();
    expect(at.report().runner).toBe('tray-full');
    expect(await at.takeProgram(next)).toMatchObject({ code: 'tray-not-cleared' });
    await at.desk.give({ kind: 'clear-tray', ...at.envelope(), runId: run.runId });
    await at.start(next);
    await at.until(
      ({ runner, runId }) => runner === 'tray-full' && runId === next.runId,
      'the next run ends',
    );
    expect(goodClosings(at)).toBe(4);
  });
});

describe('a rig that something happens to', () => {
  it('is stopped at once when its guard opens and does not cut the motors’ supply', async () => {
    const { at, run } = await cutting({ pieces: 200 });
    await pieces(at, 2);
    await at.rig.control({ do: 'guard', open: true });
    await held(at, 'guard-open');
    await at.desk.until(() => at.tally.some(({ kind }) => kind === 'killed'), 'the motors are off');
    const cut = goodClosings(at);
    expect(at.report().piecesCut).toBe(cut);
    expect(at.desk.said('piece-doubted')).toEqual([]);
    await at.rig.control({ do: 'guard', open: false });
    await at.rig.control({ do: 'reset' });
    await at.ready();
    await at.goOn(run);
    await pieces(at, cut + 2);
    expect(await at.told('trim-cut', 2)).toHaveLength(2);
  });

  it('waits at the end of the piece when the guard cuts the motors’ supply itself', async () => {
    const profile = { ...benchProfile, fitted: { ...benchProfile.fitted, guardCutsMotorPower: true } };
    const { at } = await cutting({ pieces: 200 }, { profile });
    await pieces(at, 2);
    await at.rig.control({ do: 'guard', open: true });
    await held(at, 'guard-open');
    expect(at.tally.some(({ kind }) => kind === 'killed')).toBe(false);
    expect(await at.told('guard-opened', 1)).toHaveLength(1);
  });

  it('holds for wire when the spool ends, and trims the new one', async () => {
    const { at, run } = await cutting({ pieces: 20 }, { rig: { mechanics: { spoolMm: 500, tailMm: 90 } } });
    await held(at, 'wire-missing');
    const cut = at.report().piecesCut;
    expect(goodClosings(at)).toBe(cut);
    await at.rig.control({ do: 'spool', mm: 50_000 });
    await at.until(({ signals }) => signals.wire.reading === 'present', 'the wire is read');
    await finish(at, run);
    expect(at.desk.said('trim-cut')).toHaveLength(2);
  });

  it('is found again after its cable was out, and counts what the jaws had closed on', async () => {
    const { at, run } = await cutting({ pieces: 12 });
    await pieces(at, 4);
    await at.rig.control({ do: 'usb', plugged: false });
    await held(at, 'link-lost');
    await at.rig.control({ do: 'usb', plugged: true });
    await at.ready();
    await finish(at, run);
    expect(at.desk.said('piece-doubted')).toEqual([]);
    expect(at.desk.said('piece-cut').map(({ piece }) => piece)).toEqual(
      Array.from({ length: 12 }, (_, index) => index + 1),
    );
  });

  it('is never gone on with across a reset of its firmware', async () => {
    const { at, run } = await cutting({ pieces: 12 });
    await pieces(at, 4);
    await at.rig.control({ do: 'reset' });
    const { holdReason } = await at.until(
      ({ runner, port }) => runner === 'held' && port === 'open',
      'the run is held',
    );
    const closings = at.closings().length;
    if (holdReason === 'doubt') {
      const answer = goodClosings(at) > at.report().piecesCut ? 'count' : 'discard';
      await at.desk.give({ kind: 'settle-piece', ...at.envelope(), runId: run.runId, answer });
    } else {
      expect(holdReason).toBe('firmware-reset');
    }
    expect(at.closings()).toHaveLength(closings);
    await finish(at, run);
    expect(at.desk.said('trim-cut')).toHaveLength(2);
  });

  it('cuts every piece once over a line that loses oks and flips bits', async () => {
    const { at, run } = await cutting({ pieces: 15 });
    await pieces(at, 2);
    await at.rig.control({ do: 'ok', fault: 'swallow', count: 2 });
    await pieces(at, 4);
    await at.rig.control({ do: 'noise', kind: 'flip', direction: 'in', bytes: 2_000, probability: 0.01 });
    await at.until(
      ({ runner }) => runner === 'tray-full' || runner === 'held',
      'the run ends or is held',
      55_000,
    );
    const { runner } = at.report();
    const counted = at.desk.said('piece-cut').length;
    expect(goodClosings(at)).toBeGreaterThanOrEqual(counted);
    if (runner === 'held') {
      // What was refused is cut anew, and what was cut of it was not counted.
      await at.goOn(run);
      await ended(at);
    }
    expect(at.desk.said('piece-cut').map(({ piece }) => piece)).toEqual(
      Array.from({ length: 15 }, (_, index) => index + 1),
    );
  }, 90_000);
});

describe('a rig without a spare axis', () => {
  const profile = { ...benchProfile, registerAxis: null };

  it('cuts and counts by the agent’s own word', async () => {
    const { at } = await cutting({ pieces: 6 }, { profile });
    await ended(at);
    expect(goodClosings(at)).toBe(6);
    expect(at.desk.said('piece-cut')).toHaveLength(6);
  });

  it('has its open piece settled by a person when the agent dies', async () => {
    const { at, run } = await cutting({ pieces: 6 }, { profile });
    await new Promise((resolve, reject) => {
      at.onLine = (line) => {
        if (goodClosings(at) < 2 || !/^G1 Z5\.5/.test(line)) return;
        at.onLine = () => undefined;
        at.kill().then(resolve, reject);
      };
    });
    at.startAgent();
    await held(at, 'doubt');
    expect((await at.told('piece-doubted', 1)).map(({ piece }) => piece)).toEqual([3]);
    await at.desk.give({ kind: 'settle-piece', ...at.envelope(), runId: run.runId, answer: 'count' });
    await finish(at, run);
  });
});
