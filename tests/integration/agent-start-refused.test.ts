import { randomUUID } from 'node:crypto';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { CommandAnswer, MovingCommand } from '@/lib/protocol/commands';
import type { RunProgram } from '@/lib/protocol/pairing';
import { AgentBench } from '../support/agent-bench';

type StartCommand = Extract<MovingCommand, { kind: 'start-run' }>;

let bench: AgentBench;
let run: RunProgram;

beforeEach(async () => {
  bench = await AgentBench.open();
  bench.startAgent();
  await bench.ready();
  run = bench.makeRun({ pieces: 3, lengthMm: 40 });
  await bench.takeProgram(run);
});

afterEach(() => bench.close());

function codeOf(answer: CommandAnswer): string {
  return answer.outcome === 'refused' ? answer.code : answer.outcome;
}

async function startWith(change: Partial<StartCommand>): Promise<string> {
  return codeOf(await bench.desk.give({ ...(await bench.startCommand(run)), ...change }));
}

function nothingMoved(): void {
  expect(bench.rig.snapshot().motionMs).toBe(0);
  expect(bench.tally.filter(({ kind }) => kind === 'closing' || kind === 'homed')).toEqual([]);
  expect(bench.desk.said('run-started')).toEqual([]);
}

describe('law 5 at the rig: the agent starts nothing', () => {
  it('by a command that is not of now, of it, of this fence, of this program', async () => {
    const late = new Date(Date.now() - 6_000).toISOString();
    expect(await startWith({ issuedAt: late })).toBe('command-late');
    expect(await startWith({ challenge: 'a-challenge-of-another-moment' })).toBe('challenge-wrong');
    expect(await startWith({ programSha256: '0'.repeat(64) })).toBe('program-not-held');
    expect(await startWith({ runId: randomUUID() })).toBe('program-not-held');
    bench.fence = 5;
    await bench.readCode();
    bench.fence = 4;
    expect(await startWithFence(4)).toBe('fence-old');
    nothingMoved();
  });

  it('without notes, tray, wire, enough of it, or on a rig that somebody works on', async () => {
    const conditions = bench.conditions();
    const old = new Date(Date.now() - 17 * 3_600_000).toISOString();
    expect(await startWith({ conditions: { ...conditions, acknowledgedAt: old } })).toBe(
      'notes-not-acknowledged',
    );
    expect(await startWith({ conditions: { ...conditions, trayCleared: false } })).toBe('tray-not-cleared');
    expect(await startWith({ conditions: { ...conditions, loadedWireId: randomUUID() } })).toBe('wrong-wire');
    expect(await startWith({ conditions: { ...conditions, spoolLeftMm: 131.9 } })).toBe('wire-short');
    expect(await startWith({ conditions: { ...conditions, workHold: true } })).toBe('work-hold');
    await bench.desk.give({ kind: 'begin-work-hold', ...bench.envelope() });
    expect(await startWith({})).toBe('work-hold');
    nothingMoved();
  });

  it('without the code that the display shows, and shows another after three wrong ones', async () => {
    expect(await startWith({ presenceCode: null })).toBe('presence-missing');
    const command = await bench.startCommand(run);
    const wrong = command.presenceCode === '0000' ? '0001' : '0000';
    for (let tries = 1; tries <= 3; tries += 1) {
      const answer = await bench.desk.give({ ...command, id: randomUUID(), presenceCode: wrong });
      expect(codeOf(answer)).toBe('presence-wrong');
    }
    const shown = `CODE ${command.presenceCode}`;
    await bench.until(
      ({ virtualDisplay }) => virtualDisplay !== null && virtualDisplay !== shown,
      'another code',
    );
    nothingMoved();
  });

  it('while guard, heater or wire switch say otherwise', async () => {
    await bench.rig.control({ do: 'guard', open: true });
    await bench.until(({ signals }) => signals.guard.reading === 'open', 'the open guard is read');
    expect(await startWith({})).toBe('guard-open');
    await bench.rig.control({ do: 'guard', open: false });
    await bench.until(({ signals }) => signals.guard.reading === 'closed', 'the closed guard is read');

    await bench.rig.control({ do: 'wire', out: true });
    await bench.until(({ signals }) => signals.wire.reading === 'missing', 'the missing wire is read');
    expect(await startWith({})).toBe('wire-missing');
    await bench.rig.control({ do: 'wire', out: false });
    await bench.until(({ signals }) => signals.wire.reading === 'present', 'the wire is read');

    await bench.rig.control({ do: 'heater', warmsToC: 90 });
    await bench.until(({ signals }) => signals.heater.reading === 'warm', 'the warm heater is read');
    expect(await startWith({})).toBe('heater-on');
    nothingMoved();
  });

  it('when the cable is out', async () => {
    const command = await bench.startCommand(run);
    await bench.rig.control({ do: 'usb', plugged: false });
    await bench.until(({ port }) => port !== 'open', 'the loss is seen');
    expect(codeOf(await bench.desk.give({ ...command, issuedAt: new Date().toISOString() }))).toBe(
      'rig-not-connected',
    );
  });

  it('a second time by the same command, also after it was killed and started again', async () => {
    const command = await bench.startCommand(run);
    expect(codeOf(await bench.desk.give(command))).toBe('done');
    const again = async () => {
      bench.desk.answers.delete(command.id);
      return codeOf(await bench.desk.give({ ...command, issuedAt: new Date().toISOString() }));
    };
    expect(await again()).toBe('command-replayed');
    await bench.restartAgent();
    await bench.told('agent-started', 2);
    await bench.until(({ runner, port }) => port === 'open' && runner === 'held', 'the run is held');
    expect(await again()).toBe('command-replayed');
    expect(bench.desk.said('run-started')).toHaveLength(1);
  });
});

async function startWithFence(fence: number): Promise<string> {
  const display = bench.rig.snapshot().display;
  const { challenge } = await bench.until(
    ({ virtualDisplay }) => virtualDisplay === display,
    'the code is reported',
  );
  const command: StartCommand = {
    kind: 'start-run',
    ...bench.envelope(),
    fence,
    challenge,
    presenceCode: display.replace('CODE ', ''),
    conditions: bench.conditions(),
    runId: run.runId,
    programSha256: run.programSha256,
  };
  return codeOf(await bench.desk.give(command));
}
