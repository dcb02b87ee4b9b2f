import type { ReplyKind } from '@/agent/dialect/reply';
import { POLL_EVERY_MS } from '@/lib/program/guard';
import type { ProgramStep } from '@/lib/program/steps';
import { displayText } from './display';
import { motionBoundMs } from './measures';
import { stepsOf, type Cursor, type Purpose, type RigState, type Run } from './state';

export interface NextLine {
  purpose: Purpose;
  command: string;
  expectedMs: number;
  needs: ReplyKind | null;
}

const NEEDS: Partial<Record<ProgramStep['kind'], ReplyKind>> = {
  declare: 'position',
  ask: 'position',
  register: 'position',
};

/** The program's own register line holds the count 0; after a new homing it must hold what is cut. */
function stepAt(run: Run, cursor: Cursor): ProgramStep | null {
  const step = stepsOf(run.program, cursor)[cursor.index] ?? null;
  if (step?.kind !== 'register' || cursor.part !== 'register' || run.cut === 0) return step;
  return registerStep(run, run.cut) ?? step;
}

/** The line that writes the count `piece` into the register. */
export function registerStep(run: Run, piece: number): ProgramStep | null {
  const steps = stepsOf(run.program, piece === 0 ? { part: 'register', piece: 0 } : { part: 'piece', piece });
  return steps.find((step) => step.kind === 'register') ?? null;
}

function settleLine(state: RigState): NextLine | null {
  const { settle, run } = state;
  if (!settle) return null;
  const purpose: Purpose = { for: 'settle', stage: settle };
  if (settle === 'await') return { purpose, command: 'M400', expectedMs: motionBoundMs(run), needs: null };
  if (settle === 'ask') return { purpose, command: 'M114', expectedMs: 0, needs: 'position' };
  const step = run?.openCut ? registerStep(run, run.openCut) : null;
  return step ? { purpose, command: step.line, expectedMs: 0, needs: 'position' } : null;
}

function pollLine({ profile, polledMs }: RigState, nowMs: number): NextLine | null {
  const { guardSwitch, wireSwitch, heater } = profile.fitted;
  const due = (lastMs: number) => nowMs - lastMs >= POLL_EVERY_MS;
  if ((guardSwitch || wireSwitch) && due(polledMs.switches)) {
    return { purpose: { for: 'switches' }, command: 'M119', expectedMs: 0, needs: 'switches' };
  }
  if (heater && due(polledMs.heaters)) {
    return { purpose: { for: 'heaters' }, command: 'M105', expectedMs: 0, needs: 'temperature' };
  }
  return null;
}

function displayLine(state: RigState): NextLine | null {
  const wanted = displayText(state);
  if (!state.profile.fitted.display || wanted === null || wanted === state.displayShown) return null;
  return { purpose: { for: 'display', text: wanted }, command: `M117 ${wanted}`, expectedMs: 0, needs: null };
}

/** A rig that has waited long enough lets its steppers go; then it must home (design.md 5). */
function letGoLine({ profile, run }: RigState, nowMs: number): NextLine | null {
  if (!run || (run.mode !== 'paused' && run.mode !== 'held') || run.unknown) return null;
  if (run.stillSinceMs === null || nowMs - run.stillSinceMs < profile.steppersHoldS * 1000) return null;
  return { purpose: { for: 'let-go' }, command: 'M84', expectedMs: 0, needs: null };
}

function programLine(run: Run): NextLine | null {
  const step = stepAt(run, run.cursor);
  if (!step) return null;
  return {
    purpose: { for: 'step', cursor: run.cursor, step },
    command: step.line,
    expectedMs: step.expectedMs,
    needs: NEEDS[step.kind] ?? null,
  };
}

/**
 * The one place that decides what may be sent, given that nothing is in flight. A line of the program comes out only
 * of a run that is moving and a rig on which nobody works.
 */
export function nextLine(state: RigState, nowMs: number): NextLine | null {
  if (state.port !== 'open' || state.halted || state.outstanding) return null;
  const { run } = state;
  const settling = settleLine(state);
  if (settling) return settling;
  if (run?.mode !== 'moving') {
    return displayLine(state) ?? letGoLine(state, nowMs) ?? pollLine(state, nowMs);
  }
  if (state.workHold) return null;
  const between = run.cursor.index === 0;
  return (between ? (pollLine(state, nowMs) ?? displayLine(state)) : null) ?? programLine(run);
}
