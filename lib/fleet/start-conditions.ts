import type { ErrorCode } from '@/lib/errors';
import { SILENT_AFTER_MS } from './rig-state';
import type { RunState } from './run';

/** A reading older than this says nothing about fingers. */
export const READING_FRESH_MS = 5_000;

type Reading<Word extends string> =
  { fitted: false } | { fitted: true; reading: Word | 'unknown'; ageMs: number };

/** Everything that law 5 asks, as known when a person wants a rig to move. Lengths in mm, ages in ms. */
export interface StartFacts {
  action: 'start' | 'go-on';
  mayOperate: boolean;
  runState: RunState;
  /** The run's fencing number is the rig's: nobody has taken the work away meanwhile. */
  fenceCurrent: boolean;
  outOfService: boolean;
  heardAgoMs: number | null;
  connected: boolean;
  /** The agent's software is not known to be older than the server bears. */
  agentRecent: boolean;
  workHold: boolean;
  trayCleared: boolean;
  programHeld: boolean;
  /** This very person has confirmed the notes in force for this very run. */
  notesAcknowledged: boolean;
  doubtOpen: boolean;
  piecesToMeasure: number;
  guard: Reading<'closed' | 'open'>;
  heater: Reading<'off' | 'on' | 'warm'>;
  wireSwitch: Reading<'present' | 'missing'>;
  wireNeededId: string;
  wireLoadedId: string | null;
  spoolLeftMm: number | null;
  wireNeededMm: number;
  displayFitted: boolean;
  presenceCode: string | null;
}

type Condition = readonly [ErrorCode, (facts: StartFacts) => boolean];

const FROM: Record<StartFacts['action'], readonly RunState[]> = {
  start: ['prepared'],
  'go-on': ['paused', 'held'],
};

function reads<Word extends string>(signal: Reading<Word>, word: Word): boolean {
  return !signal.fitted || (signal.reading === word && signal.ageMs <= READING_FRESH_MS);
}

/** In the order in which a person is told: who and what, then the rig, then what they must do at it. */
const CONDITIONS: readonly Condition[] = [
  ['not-allowed', (f) => f.mayOperate],
  ['illegal-step', (f) => FROM[f.action].includes(f.runState)],
  ['fence-old', (f) => f.fenceCurrent],
  ['out-of-service', (f) => !f.outOfService],
  ['rig-silent', (f) => f.heardAgoMs !== null && f.heardAgoMs <= SILENT_AFTER_MS],
  ['rig-not-connected', (f) => f.connected],
  // What has begun may be finished: going on is not starting.
  ['agent-too-old', (f) => f.agentRecent || f.action === 'go-on'],
  ['work-hold', (f) => !f.workHold],
  ['tray-not-cleared', (f) => f.trayCleared],
  ['program-not-held', (f) => f.programHeld],
  ['notes-not-acknowledged', (f) => f.notesAcknowledged],
  ['doubt-open', (f) => !f.doubtOpen],
  ['first-pieces-open', (f) => f.piecesToMeasure === 0],
  ['guard-open', (f) => reads(f.guard, 'closed')],
  ['heater-on', (f) => reads(f.heater, 'off')],
  ['wrong-wire', (f) => f.wireLoadedId === f.wireNeededId],
  ['wire-missing', (f) => !f.wireSwitch.fitted || f.wireSwitch.reading !== 'missing'],
  ['wire-short', (f) => f.spoolLeftMm !== null && f.spoolLeftMm >= f.wireNeededMm],
  ['presence-missing', (f) => !f.displayFitted || (f.presenceCode !== null && f.presenceCode !== '')],
];

/**
 * Law 5: why a rig may not start or go on now, or null when it may. The agent asks again with what it knows itself
 * and is the only one that can judge the code on the display.
 */
export function refuseStart(facts: StartFacts): ErrorCode | null {
  return CONDITIONS.find(([, holds]) => !holds(facts))?.[0] ?? null;
}
