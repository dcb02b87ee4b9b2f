import { describe, expect, it } from 'vitest';
import { refuseStart, type StartFacts } from '@/lib/fleet/start-conditions';

/** Everything as law 5 wants it, on a rig with everything fitted. */
const good: StartFacts = {
  action: 'start',
  mayOperate: true,
  runState: 'prepared',
  fenceCurrent: true,
  outOfService: false,
  heardAgoMs: 900,
  connected: true,
  agentRecent: true,
  workHold: false,
  trayCleared: true,
  programHeld: true,
  notesAcknowledged: true,
  doubtOpen: false,
  piecesToMeasure: 0,
  guard: { fitted: true, reading: 'closed', ageMs: 900 },
  heater: { fitted: true, reading: 'off', ageMs: 900 },
  wireSwitch: { fitted: true, reading: 'present', ageMs: 900 },
  wireNeededId: 'green',
  wireLoadedId: 'green',
  spoolLeftMm: 1200,
  wireNeededMm: 1200,
  displayFitted: true,
  presenceCode: '4711',
};

const missing: [string, Partial<StartFacts>, string][] = [
  ['the role', { mayOperate: false }, 'not-allowed'],
  ['a run that waits', { runState: 'cutting' }, 'illegal-step'],
  ['a run that is not over', { runState: 'ended' }, 'illegal-step'],
  ['the fence', { fenceCurrent: false }, 'fence-old'],
  ['service', { outOfService: true }, 'out-of-service'],
  ['any word of the rig', { heardAgoMs: null }, 'rig-silent'],
  ['a fresh word of the rig', { heardAgoMs: 8_001 }, 'rig-silent'],
  ['the cable', { connected: false }, 'rig-not-connected'],
  ['an agent that is not too old', { agentRecent: false }, 'agent-too-old'],
  ['free hands', { workHold: true }, 'work-hold'],
  ['an empty tray', { trayCleared: false }, 'tray-not-cleared'],
  ['the program', { programHeld: false }, 'program-not-held'],
  ['the notes', { notesAcknowledged: false }, 'notes-not-acknowledged'],
  ['an answer to the doubt', { doubtOpen: true }, 'doubt-open'],
  ['lengths', { piecesToMeasure: 1 }, 'first-pieces-open'],
  ['a shut guard', { guard: { fitted: true, reading: 'open', ageMs: 0 } }, 'guard-open'],
  ['a guard that is read', { guard: { fitted: true, reading: 'unknown', ageMs: 0 } }, 'guard-open'],
  ['a fresh guard', { guard: { fitted: true, reading: 'closed', ageMs: 5_001 } }, 'guard-open'],
  ['a heater off', { heater: { fitted: true, reading: 'on', ageMs: 0 } }, 'heater-on'],
  ['a cold heater', { heater: { fitted: true, reading: 'warm', ageMs: 0 } }, 'heater-on'],
  ['a heater that is read', { heater: { fitted: true, reading: 'unknown', ageMs: 0 } }, 'heater-on'],
  ['the right wire', { wireLoadedId: 'red' }, 'wrong-wire'],
  ['a spool', { wireLoadedId: null, spoolLeftMm: null }, 'wrong-wire'],
  ['wire at the guide', { wireSwitch: { fitted: true, reading: 'missing', ageMs: 0 } }, 'wire-missing'],
  ['enough wire', { spoolLeftMm: 1199.9 }, 'wire-short'],
  ['the code', { presenceCode: null }, 'presence-missing'],
  ['any digit of the code', { presenceCode: '' }, 'presence-missing'],
];

describe('law 5 as the server asks it', () => {
  it('lets a run start when every condition holds', () => {
    expect(refuseStart(good)).toBeNull();
  });

  it.each(missing)('refuses without %s', (_what, facts, code) => {
    expect(refuseStart({ ...good, ...facts })).toBe(code);
  });

  it.each(['paused', 'held'] as const)('lets a %s run go on, and not start again', (runState) => {
    expect(refuseStart({ ...good, action: 'go-on', runState })).toBeNull();
    expect(refuseStart({ ...good, action: 'start', runState })).toBe('illegal-step');
  });

  it('lets what has begun be finished by an agent that is too old to start', () => {
    expect(refuseStart({ ...good, action: 'go-on', runState: 'held', agentRecent: false })).toBeNull();
  });

  it('does not let a run go on that has not begun', () => {
    expect(refuseStart({ ...good, action: 'go-on' })).toBe('illegal-step');
  });

  it('takes nothing for good that is fitted, and asks nothing of what is not', () => {
    const bare = { fitted: false } as const;
    const plain = { guard: bare, heater: bare, wireSwitch: bare, displayFitted: false, presenceCode: null };
    expect(refuseStart({ ...good, ...plain })).toBeNull();
  });

  it('holds at its limits: 5 s for a reading, 8 s for the rig, the last millimetre of wire', () => {
    const guard = { fitted: true, reading: 'closed', ageMs: 5_000 } as const;
    expect(refuseStart({ ...good, guard, heardAgoMs: 8_000, spoolLeftMm: 1200 })).toBeNull();
  });
});
