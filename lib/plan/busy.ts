import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import type { RunState } from '@/lib/fleet/run';
import type { RunnerState } from '@/lib/protocol/report';
import type { BusyRig } from './work';

/** What is known of a rig when a lot is to be given. Times in ms, of one clock. */
export interface RigStanding {
  nowMs: number;
  outOfService: boolean;
  workHold: boolean;
  /** When it was last heard with its port open; null: never, or no agent is bound to it. */
  heardAtMs: number | null;
  connected: boolean;
  /** What its agent says of itself; null when nothing was heard. */
  runner: RunnerState | null;
  /** The run that owns the rig, up to the empty tray; null when none does. */
  run: {
    state: RunState;
    pieces: number;
    cut: number;
    expectedS: number;
  } | null;
}

/** The agent has nothing of an earlier run under way. `tray-full`: the tray is cleared here, the word is on its way. */
export const IDLE_RUNNERS: readonly RunnerState[] = ['idle', 'tray-full'];

function freeAt({ nowMs, run }: RigStanding): Date | null {
  if (!run || run.pieces < 1) return null;
  const leftS = (run.expectedS * (run.pieces - run.cut)) / run.pieces;
  return new Date(nowMs + leftS * 1000);
}

function ofRun(standing: RigStanding): BusyRig | null {
  switch (standing.run?.state) {
    case undefined:
    case 'cleared':
    case 'dropped':
      return null;
    case 'prepared':
      return { doing: 'ready to start', freeAt: null };
    case 'cutting':
      return { doing: 'cutting', freeAt: freeAt(standing) };
    case 'paused':
      return { doing: 'paused', freeAt: null };
    case 'held':
      return { doing: 'held', freeAt: null };
    case 'ended':
    case 'released':
      return { doing: 'tray full', freeAt: null };
  }
}

/** Why the rig can take no lot now, the plainest reason first; null when it is free. */
export function busyOf(standing: RigStanding): BusyRig | null {
  const { nowMs, heardAtMs, runner } = standing;
  if (standing.outOfService) return { doing: 'out of service', freeAt: null };
  if (heardAtMs === null || nowMs - heardAtMs > SILENT_AFTER_MS || !standing.connected) {
    return { doing: 'silent', freeAt: null };
  }
  if (standing.workHold) return { doing: 'work hold', freeAt: null };
  const run = ofRun(standing);
  if (run) return run;
  // Work that a person took from the rig may still be in its agent's hands.
  return runner !== null && !IDLE_RUNNERS.includes(runner) ? { doing: 'unsettled', freeAt: null } : null;
}
