import { describe, expect, it } from 'vitest';
import { refuseMoving } from '@/agent/runner/refuse-moving';
import type { RigState } from '@/agent/runner/state';
import type { ErrorCode } from '@/lib/errors';
import type { MovingCommand } from '@/lib/protocol/commands';
import type { Profile } from '@/lib/program/profile';
import { bareProfile, drivenRig, RUN, WIRE } from './driven-rig';

const everything: Profile = {
  ...bareProfile,
  fitted: {
    ...bareProfile.fitted,
    guardSwitch: { endstop: 'x_max', closedReads: 'TRIGGERED' },
    wireSwitch: true,
    display: true,
    heater: true,
  },
};

/** A rig on which everything is as it must be, and the command that would start its run: 4 pieces of 200 mm. */
function allGood(profile = everything): { state: RigState; command: MovingCommand; nowMs: number } {
  const rig = drivenRig({ pieces: 4, lengthMm: 200 }, profile);
  rig.meet();
  rig.command({ kind: 'take-program', ...rig.envelope(), runId: RUN });
  const readAt = new Date(rig.nowMs).toISOString();
  const state: RigState = {
    ...rig.state,
    presence: { code: '4711', madeMs: rig.nowMs, wrong: 0 },
    signals: {
      guard: { reading: 'closed', readAt },
      wire: { reading: 'present', readAt },
      heater: { reading: 'off', targetC: 0, actualC: 20, readAt },
    },
  };
  return { state, command: { ...rig.moving('start-run'), presenceCode: '4711' }, nowMs: rig.nowMs };
}

const { state, command, nowMs } = allGood();
const iso = (ms: number) => new Date(ms).toISOString();
const withConditions = (change: Partial<MovingCommand['conditions']>) => ({
  conditions: { ...command.conditions, ...change },
});
const withSignals = (change: Partial<RigState['signals']>) => ({ signals: { ...state.signals, ...change } });
const run = state.run;
if (!run) throw new Error('no run');

type Row = [name: string, code: ErrorCode | null, state: Partial<RigState>, command: Partial<MovingCommand>];

const ROWS: Row[] = [
  ['everything is as it must be', null, {}, {}],
  ['it is 5 s old', null, {}, { issuedAt: iso(nowMs - 5_000) }],
  ['it is older than 5 s', 'command-late', {}, { issuedAt: iso(nowMs - 5_001) }],
  ['it is of the future', 'command-late', {}, { issuedAt: iso(nowMs + 5_001) }],
  ['it was carried out before', 'command-replayed', { taken: [command.id] }, {}],
  ['a higher fence was seen', 'fence-old', { fence: 4 }, {}],
  ['its fence is a new one', null, {}, { fence: 4 }],
  ['it answers another challenge', 'challenge-wrong', {}, { challenge: 'another-challenge-altogether' }],
  ['the port is closed', 'rig-not-connected', { port: 'closed' }, {}],
  ['the board has halted', 'rig-not-connected', { halted: true }, {}],
  ['no program is held', 'program-not-held', { run: null }, {}],
  ['another program is meant', 'program-not-held', {}, { programSha256: 'b'.repeat(64) }],
  ['the last run is in the tray', 'tray-not-cleared', { run: { ...run, mode: 'ended' } }, {}],
  ['a piece is in doubt', 'doubt-open', { run: { ...run, mode: 'held', doubt: 2 } }, {}],
  ['the run goes already', 'illegal-step', { run: { ...run, mode: 'moving' } }, {}],
  ['where the rig stands is not known', 'illegal-step', { run: { ...run, unknown: true } }, {}],
  ['the agent knows of a work hold', 'work-hold', { workHold: { personId: WIRE, answerTo: [] } }, {}],
  ['the server knows of a work hold', 'work-hold', {}, withConditions({ workHold: true })],
  ['the tray is not cleared', 'tray-not-cleared', {}, withConditions({ trayCleared: false })],
  [
    'the notes were acknowledged in another shift',
    'notes-not-acknowledged',
    {},
    withConditions({ acknowledgedAt: iso(nowMs - 16 * 3_600_000 - 1) }),
  ],
  ['the guard is open', 'guard-open', withSignals({ guard: { reading: 'open', readAt: iso(nowMs) } }), {}],
  ['the guard is not read', 'guard-open', withSignals({ guard: { reading: 'unknown' } }), {}],
  [
    'the guard was read 3 s ago',
    null,
    withSignals({ guard: { reading: 'closed', readAt: iso(nowMs - 3_000) } }),
    {},
  ],
  [
    'the guard was read longer ago',
    'guard-open',
    withSignals({ guard: { reading: 'closed', readAt: iso(nowMs - 3_001) } }),
    {},
  ],
  ['no guard switch is fitted', null, withSignals({ guard: { reading: 'not fitted' } }), {}],
  [
    'a heater is on',
    'heater-on',
    withSignals({ heater: { reading: 'on', targetC: 60, actualC: 20, readAt: iso(nowMs) } }),
    {},
  ],
  [
    'a heater is warm',
    'heater-on',
    withSignals({ heater: { reading: 'warm', targetC: 0, actualC: 51, readAt: iso(nowMs) } }),
    {},
  ],
  ['the heaters are not read', 'heater-on', withSignals({ heater: { reading: 'unknown' } }), {}],
  ['no wire is loaded', 'wrong-wire', {}, withConditions({ loadedWireId: null })],
  ['another wire is loaded', 'wrong-wire', {}, withConditions({ loadedWireId: RUN })],
  [
    'no wire is at the guide',
    'wire-missing',
    withSignals({ wire: { reading: 'missing', readAt: iso(nowMs) } }),
    {},
  ],
  ['the wire switch is not read', 'wire-missing', withSignals({ wire: { reading: 'unknown' } }), {}],
  // 4 pieces of 200 mm and a trim of 12 mm.
  ['the spool holds 812 mm', null, {}, withConditions({ spoolLeftMm: 812 })],
  ['the spool holds less than 812 mm', 'wire-short', {}, withConditions({ spoolLeftMm: 811.9 })],
  ['no spool is loaded', 'wire-short', {}, withConditions({ spoolLeftMm: null })],
  ['no code is given', 'presence-missing', {}, { presenceCode: null }],
  ['no code is shown', 'presence-missing', { presence: null }, {}],
  [
    'the code was shown more than 2 min ago',
    'presence-missing',
    { presence: { code: '4711', madeMs: nowMs - 120_001, wrong: 0 } },
    {},
  ],
  ['the code is another', 'presence-wrong', {}, { presenceCode: '4712' }],
];

describe('law 5: a command that may move something', () => {
  it.each(ROWS)('when %s: %s', (_name, code, stateChange, commandChange) => {
    const given = { ...command, ...commandChange } as MovingCommand;
    expect(refuseMoving({ ...state, ...stateChange }, given, nowMs)).toBe(code);
  });

  it('needs no code where no display is fitted', () => {
    const bare = allGood(bareProfile);
    expect(refuseMoving(bare.state, { ...bare.command, presenceCode: null }, bare.nowMs)).toBeNull();
  });

  it('is aged by the server’s clock, readings by the agent’s own', () => {
    const aheadMs = 60_000;
    const ofServer = {
      ...command,
      ...withConditions({ acknowledgedAt: iso(nowMs + aheadMs) }),
      issuedAt: iso(nowMs + aheadMs),
    } as MovingCommand;
    expect(refuseMoving(state, ofServer, nowMs + aheadMs, nowMs)).toBeNull();
    expect(refuseMoving(state, ofServer, nowMs, nowMs)).toBe('command-late');
  });

  it('that goes on takes a run that waits, and no other', () => {
    const goOn = { ...command, kind: 'go-on', firstPiecesAgain: false } as MovingCommand;
    const modes = {
      paused: null,
      held: null,
      holding: 'illegal-step',
      moving: 'illegal-step',
      settling: 'illegal-step',
    };
    for (const [mode, code] of Object.entries(modes)) {
      const waiting = { ...state, run: { ...run, mode: mode as typeof run.mode } };
      expect(refuseMoving(waiting, goOn, nowMs)).toBe(code);
    }
    const damaged = { ...state, run: { ...run, mode: 'held' as const, hold: 'journal-damaged' as const } };
    expect(refuseMoving(damaged, goOn, nowMs)).toBe('illegal-step');
  });
});
