import type { PositionReport } from '@/agent/dialect/position';
import { countPiece, isTrimCut, noteTrim, positionIn, shows, type Answered } from './counting';
import {
  answerWorkHold,
  doubtOrHold,
  enterHold,
  finishRun,
  requireHome,
  settled,
  voidOpenCut,
} from './holding';
import { registerStep } from './next-line';
import { whereStands } from './standing';
import type { SettleStage } from './state';
import type { Turn } from './turn';

/** What the answer to a question after the standstill means. */
export function onSettle(turn: Turn, stage: SettleStage, answered: Answered): void {
  const { run } = turn.state;
  if (turn.state.settle !== stage) return;
  const active = run && run.mode !== 'holding' && run.mode !== 'ended';
  if (stage === 'await') {
    if (!answered.sure) return;
    motionEnded(turn, active ?? false);
    return;
  }
  const position = positionIn(answered.replies);
  if (!position) return;
  if (stage === 'ask') return resolve(turn, position);
  const step = run?.openCut ? registerStep(run, run.openCut) : null;
  if (!run?.openCut || step?.kind !== 'register') return settled(turn);
  if (!shows(turn, step.register, answered)) return;
  countPiece(turn, run.openCut);
  turn.set({ settle: 'ask' });
}

function motionEnded(turn: Turn, active: boolean): void {
  const { run } = turn.state;
  if (!active || !run) return settled(turn);
  answerWorkHold(turn);
  if (run.mode === 'settling') {
    turn.setRun({ jawsClosedMs: turn.nowMs });
    if (isTrimCut(run, run.cursor)) noteTrim(turn);
  }
  turn.set({ settle: 'ask' });
}

/** Reads where the rig stands and makes the run agree with it (design.md 5). */
function resolve(turn: Turn, position: PositionReport): void {
  const { run, profile } = turn.state;
  if (!run) return settled(turn);
  if (!run.registered || run.after?.to === 'complete') {
    if (!run.registered) requireHome(turn, false);
    return settled(turn);
  }
  if (profile.registerAxis === null && run.unknown) return doubtOrHold(turn, 'agent-restarted');
  const standing = whereStands(run, profile, position);
  switch (standing.is) {
    case 'lost':
      return doubtOrHold(turn, 'firmware-reset');
    case 'foreign':
      return holdForeign(turn);
    case 'ahead':
      return doubtOrHold(turn, 'journal-damaged');
    case 'nowhere':
      return onNowhere(turn);
    case 'open':
      return onOpen(turn);
    case 'resume':
      if (standing.counted > run.cut) countPiece(turn, standing.counted);
      else if (run.openCut !== null) voidOpenCut(turn);
      turn.setRun({ cursor: standing.cursor });
      leaveForeign(turn);
      return settled(turn);
  }
}

/**
 * Another run's register is most likely another rig's, by swapped cables. What was open is not doubted: the right
 * board still knows. Until it is asked nothing moves, for `unknown` refuses every way on.
 */
function holdForeign(turn: Turn): void {
  const { run } = turn.state;
  turn.set({ settle: null });
  if (run?.stop && run.openCut === null) return finishRun(turn, 'stopped');
  requireHome(turn, true);
  turn.setRun({ unknown: true });
  enterHold(turn, 'register-foreign');
}

/** The right board is back: what is left is what any lost link leaves. */
function leaveForeign(turn: Turn): void {
  if (turn.state.run?.hold !== 'register-foreign') return;
  turn.setRun({ hold: null });
  enterHold(turn, 'link-lost', 'The rig with this run is back.');
}

/** Cut and not registered: written down at once, which moves nothing, unless the firmware refused something. */
function onOpen(turn: Turn): void {
  const { run } = turn.state;
  if (!run) return undefined;
  if (run.refusal === null) return turn.set({ settle: 'register' });
  voidOpenCut(turn);
  requireHome(turn, false);
  turn.setRun({ after: { to: 'held', reason: 'firmware-refused', note: run.refusal } });
  settled(turn);
}

/** A hold that says already why the rig is not where a whole piece would have left it needs no second reason. */
function onNowhere(turn: Turn): void {
  const { run } = turn.state;
  if (!run) return;
  if (run.mustHome && run.openCut === null) return settled(turn);
  doubtOrHold(turn, 'position-wrong');
}
