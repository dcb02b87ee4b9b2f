import type { Profile } from '@/lib/program/profile';
import type { ReadProgram } from '@/lib/program/steps';
import type { RunProgram } from '@/lib/protocol/pairing';
import { heldRun } from './reduce';
import type { Remembered, RememberedRun } from './memory';
import { unreadSignals, type RigState, type Run } from './state';

export interface RigBirth {
  rigId: string;
  profile: Profile;
  fence: number;
  challenge: string;
  nowMs: number;
  memory: Remembered | null;
  /** The program of the remembered run, from disk; null when it is gone. */
  held: { given: RunProgram; program: ReadProgram } | null;
}

/** A rig as it is when the agent starts: port closed, nothing read, its run where the journal left it. */
export function restoreRig({ rigId, profile, fence, challenge, nowMs, memory, held }: RigBirth): RigState {
  const run = memory?.run && held ? restoreRun(memory.run, held.given, held.program) : null;
  const inForce = run && held ? held.given.profile : profile;
  return {
    rigId,
    profile: inForce,
    port: 'closed',
    portProblem: null,
    portClosedMs: nowMs,
    halted: false,
    firmware: null,
    signals: unreadSignals(inForce),
    coldC: null,
    heaterToldMs: nowMs,
    polledMs: { switches: 0, heaters: 0 },
    outstanding: null,
    settle: null,
    fence: Math.max(fence, memory?.fence ?? 0),
    taken: memory?.taken ?? [],
    challenge,
    presence: null,
    displayShown: null,
    showing: [],
    workHold: memory?.workHold ? { personId: memory.workHold, answerTo: [] } : null,
    fetching: [],
    run,
    said: { sinceMs: nowMs, count: 0 },
  };
}

function modeOf({ ended, began, paused, hold }: RememberedRun): Run['mode'] {
  if (ended) return 'ended';
  if (!began) return 'holding';
  if (hold !== null) return 'held';
  return paused ? 'paused' : 'moving';
}

function restoreRun(memory: RememberedRun, given: RunProgram, program: ReadProgram): Run {
  const mode = modeOf(memory);
  const active = mode !== 'holding' && mode !== 'ended';
  const { firstPieces } = given;
  return {
    ...heldRun(given, program),
    mode,
    cut: memory.cut,
    openCut: memory.openCut,
    doubt: memory.doubt,
    registered: memory.registered,
    standbyCount: memory.standbyCount,
    mustHome: memory.mustHome,
    measureAgain: memory.measureAgain,
    measureAt: memory.measureFrom !== null && firstPieces > 0 ? memory.measureFrom + firstPieces : null,
    stop: memory.stop,
    hold: mode === 'held' ? memory.hold : null,
    unknown: active,
  };
}
