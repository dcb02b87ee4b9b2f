import { describe, expect, it } from 'vitest';
import { displayText } from '@/agent/runner/display';
import { nextLine } from '@/agent/runner/next-line';
import { needsFaultStop, readHeaters, readSwitches } from '@/agent/runner/signals';
import { unreadSignals, type RigState, type Run, type RunMode } from '@/agent/runner/state';
import type { Profile } from '@/lib/program/profile';
import { readReply } from '@/agent/dialect/reply';
import { bareProfile, drivenRig, PERSON, RUN } from './driven-rig';

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

const rig = drivenRig({ pieces: 2, lengthMm: 200 }, everything);
rig.meet();
rig.command({ kind: 'take-program', ...rig.envelope(), runId: RUN });
const base: RigState = { ...rig.state, outstanding: null };
const run = rig.run;
const IDLE_MS = rig.nowMs + 60_000;

const MODES: (RunMode | 'none')[] = ['none', 'holding', 'moving', 'settling', 'paused', 'held', 'ended'];

/** A rig in that mode whose display already says so. */
function inMode(mode: RunMode | 'none', change: Partial<Run> = {}): RigState {
  const state: RigState = { ...base, run: mode === 'none' ? null : { ...run, mode, ...change } };
  return { ...state, displayShown: displayText(state) };
}

/** What is sent until nothing is due any more, each line answered by nothing but its time. */
function sends(state: RigState): string[] {
  const commands: string[] = [];
  let now = state;
  for (let lines = 0; lines < 6; lines += 1) {
    const line = nextLine(now, IDLE_MS);
    if (!line) break;
    commands.push(line.command);
    const { purpose } = line;
    if (purpose.for === 'switches') now = { ...now, polledMs: { ...now.polledMs, switches: IDLE_MS } };
    else if (purpose.for === 'heaters') now = { ...now, polledMs: { ...now.polledMs, heaters: IDLE_MS } };
    else if (purpose.for === 'display') now = { ...now, displayShown: purpose.text };
    else break;
  }
  return commands;
}

const QUIET = ['M119', 'M105', 'M400', 'M114', 'M84', 'M117 CODE 4711'];

describe('what may be sent in which state', () => {
  it.each(MODES)('with a run that is %s: a line of the program only when it moves', (mode) => {
    const commands = sends({ ...inMode(mode), presence: { code: '4711', madeMs: IDLE_MS, wrong: 0 } });
    const ofProgram = commands.filter((command) => !QUIET.includes(command));
    expect(ofProgram).toEqual(mode === 'moving' ? ['M302 P1'] : []);
    expect(commands).toContain('M119');
  });

  it.each(MODES)(
    'with a run that is %s: nothing while a line is in flight, or without a living board',
    (mode) => {
      const state = inMode(mode);
      expect(nextLine({ ...state, outstanding: { for: 'switches' } }, IDLE_MS)).toBeNull();
      expect(nextLine({ ...state, halted: true }, IDLE_MS)).toBeNull();
      for (const port of ['closed', 'opening', 'refused'] as const) {
        expect(nextLine({ ...state, port }, IDLE_MS)).toBeNull();
      }
    },
  );

  it.each(MODES)('with a run that is %s: no line of the program while somebody works on the rig', (mode) => {
    const commands = sends({ ...inMode(mode), workHold: { personId: PERSON, answerTo: [] } });
    expect(commands.every((command) => QUIET.includes(command))).toBe(true);
  });

  it('asks where the rig stands before anything else', () => {
    for (const mode of MODES) {
      expect(sends({ ...inMode(mode), settle: 'await' })).toEqual(['M400']);
      expect(sends({ ...inMode(mode), settle: 'ask' })).toEqual(['M114']);
    }
  });

  it('reads switches and heaters once a second, in a run only between pieces', () => {
    const piece = { part: 'piece', piece: 1, index: 0 } as const;
    expect(sends(inMode('moving', { cursor: piece }))).toEqual(['M119', 'M105', 'G1 E100 F3600']);
    expect(sends(inMode('moving', { cursor: { ...piece, index: 1 } }))).toEqual(['G1 E200 F3600']);
    const read = { polledMs: { switches: IDLE_MS - 999, heaters: IDLE_MS - 999 } };
    expect(sends({ ...inMode('moving', { cursor: piece }), ...read })).toEqual(['G1 E100 F3600']);
    expect(sends({ ...inMode('none'), ...read })).toEqual([]);
  });

  it('reads nothing that is not fitted', () => {
    expect(sends({ ...inMode('none'), profile: bareProfile })).toEqual([]);
  });

  it.each(['paused', 'held'] as const)(
    'lets the steppers of a %s run go after the profile’s time',
    (mode) => {
      const stillSinceMs = IDLE_MS - everything.steppersHoldS * 1_000;
      expect(sends(inMode(mode, { stillSinceMs }))).toEqual(['M84']);
      expect(sends(inMode(mode, { stillSinceMs: stillSinceMs + 1 }))).not.toContain('M84');
      expect(sends(inMode(mode, { stillSinceMs, unknown: true }))).not.toContain('M84');
    },
  );
});

describe('the display', () => {
  it.each([
    ['moving', 'CUTS'],
    ['settling', 'CUTS'],
    ['paused', 'PAUSED'],
    ['held', 'HELD'],
    ['ended', 'TRAY'],
  ] as const)('says of a run that is %s: %s, and never that it cuts when it does not', (mode, text) => {
    expect(displayText({ ...inMode(mode), presence: null, displayShown: 'CODE 4711' })).toBe(text);
    expect(text).not.toContain('N');
  });

  it('shows the code for as long as one is asked for, and nothing of ours before anybody used it', () => {
    const presence = { code: '4711', madeMs: IDLE_MS, wrong: 0 };
    expect(displayText({ ...inMode('held'), presence })).toBe('CODE 4711');
    expect(displayText({ ...inMode('holding'), presence: null, displayShown: null })).toBeNull();
    expect(displayText({ ...inMode('holding'), presence: null, displayShown: 'TRAY' })).toBe('READY');
  });
});

describe('the signals', () => {
  const readAt = '2026-12-01T08:00:00.000Z';
  const unread = unreadSignals(everything);
  const told = (...lines: string[]) => lines.map(readReply);

  it('are unknown until they are read, and not fitted where nothing is', () => {
    expect(Object.values(unread).map(({ reading }) => reading)).toEqual(['unknown', 'unknown', 'unknown']);
    expect(Object.values(unreadSignals(bareProfile)).map(({ reading }) => reading)).toEqual([
      'not fitted',
      'not fitted',
      'not fitted',
    ]);
  });

  it.each([
    ['x_max: TRIGGERED', 'filament: TRIGGERED', 'closed', 'present'],
    ['x_max: open', 'filament: open', 'open', 'missing'],
    ['y_max: TRIGGERED', 'ok', 'unknown', 'unknown'],
  ])('of %s and %s are %s and %s', (guard, wire, guardReading, wireReading) => {
    const signals = readSwitches(unread, everything, told(guard, wire), readAt);
    expect([signals.guard.reading, signals.wire.reading]).toEqual([guardReading, wireReading]);
  });

  it.each([
    ['ok T:20.00 /0.00 @:0', 'off'],
    ['ok T:50.00 /0.00 @:0', 'off'],
    ['ok T:50.01 /0.00 @:0', 'warm'],
    ['ok T:20.00 /0.00 B:20.00 /60.00 @:0', 'on'],
    ['ok', 'unknown'],
  ])('of a heater that answers %s is %s', (text, reading) => {
    expect(readHeaters(unread, everything, told(text), readAt).heater.reading).toBe(reading);
  });
});

describe('a fault in mid-run is answered with M112', () => {
  const heater = (reading: 'on' | 'warm') => ({
    ...unreadSignals(everything),
    heater: { reading, targetC: 0, actualC: 60, readAt: '2026-12-01T08:00:00.000Z' },
  });
  const fitted = (emergencyParser: boolean, guardCutsMotorPower: boolean): Profile => ({
    ...everything,
    fitted: { ...everything.fitted, emergencyParser, guardCutsMotorPower },
  });

  it.each([
    [true, false, true],
    [true, true, false],
    [false, false, false],
    [false, true, false],
  ])('for an open guard: parser %s, guard cuts the supply %s: %s', (parser, cuts, stops) => {
    expect(needsFaultStop('guard-open', unreadSignals(everything), fitted(parser, cuts))).toBe(stops);
  });

  it.each([true, false])('for a heater that is on, never for one that is only warm; parser %s', (parser) => {
    expect(needsFaultStop('heater-warm', heater('on'), fitted(parser, true))).toBe(true);
    expect(needsFaultStop('heater-warm', heater('warm'), fitted(parser, true))).toBe(false);
  });
});
