import type { HoldReason } from '@/lib/fleet/run';
import { pieceLengthMm } from './measures';
import { PROGRAM_BEGIN, type After } from './state';
import type { Turn } from './turn';

/** Reasons that say less than any other: a later one takes their place, and they take nobody's. */
const WEAK: readonly HoldReason[] = ['agent-restarted', 'link-lost', 'steppers-released', 'work-hold'];
const STRONG: readonly HoldReason[] = [
  'doubt',
  'register-foreign',
  'position-wrong',
  'journal-damaged',
  'heater-warm',
];

function takesOver(reason: HoldReason, from: HoldReason): boolean {
  if (reason === from || WEAK.includes(reason)) return false;
  return STRONG.includes(reason) || WEAK.includes(from) || from === 'first-pieces';
}

/** The run waits for a person. A hold that says more is not replaced by one that says less. */
export function enterHold(turn: Turn, reason: HoldReason, note = ''): void {
  const { run, rigId } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended') return;
  const kept = run.mode === 'held' && run.hold !== null && !takesOver(reason, run.hold);
  turn.setRun({ mode: 'held', after: null, pause: null, stillSinceMs: run.stillSinceMs ?? turn.nowMs });
  if (kept) return;
  turn.setRun({ hold: reason });
  turn.event({ kind: 'run-held', rigId, runId: run.order.runId, reason, note: note.slice(0, 300) });
}

/** Before it moves on the rig homes and trims, and with `measureAgain` its first pieces are measured again. */
export function requireHome(turn: Turn, measureAgain: boolean): void {
  const { run, rigId } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended') return;
  if (run.mustHome && (run.measureAgain || !measureAgain)) return;
  turn.setRun({ mustHome: true, measureAgain: run.measureAgain || measureAgain });
  turn.note({
    note: 'must-home',
    rigId,
    runId: run.order.runId,
    measureAgain: run.measureAgain || measureAgain,
  });
}

/** No more motion in this run. */
export function finishRun(turn: Turn, outcome: 'complete' | 'stopped'): void {
  const { run, rigId } = turn.state;
  if (!run) return;
  turn.setRun({ mode: 'ended', after: null, unknown: false, pause: null, hold: null });
  turn.event({
    kind: 'run-ended',
    rigId,
    runId: run.order.runId,
    outcome,
    pieces: run.cut,
    personId: outcome === 'stopped' ? (run.stop?.personId ?? null) : null,
  });
}

/** Sends nothing more of the program; what becomes of the run is decided when the rig stands still. */
export function beginSettle(turn: Turn, after: After): void {
  const { run } = turn.state;
  if (!run) return;
  turn.setRun({ mode: 'settling', after: run.stop ? { to: 'ended', personId: run.stop.personId } : after });
  turn.set({ settle: 'await' });
}

/** The open piece is no good one; it will be cut anew. */
export function voidOpenCut(turn: Turn): void {
  const { run, rigId } = turn.state;
  if (!run || run.openCut === null) return;
  turn.note({ note: 'cut-void', rigId, runId: run.order.runId, piece: run.openCut });
  turn.setRun({ openCut: null });
}

/** Law 3: an open piece is said, not guessed; without one the run is held for `reason`. */
export function doubtOrHold(turn: Turn, reason: HoldReason, note = ''): void {
  const { run, rigId } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended') return;
  requireHome(turn, true);
  turn.setRun({ unknown: false });
  turn.set({ settle: null });
  if (run.openCut === null) {
    if (run.stop) finishRun(turn, 'stopped');
    else enterHold(turn, reason, note);
    return;
  }
  if (run.doubt === null) {
    const { runId } = run.order;
    turn.setRun({ doubt: run.openCut });
    turn.event({ kind: 'piece-doubted', rigId, runId, piece: run.openCut, wireMm: pieceLengthMm(run) });
  }
  enterHold(turn, 'doubt', note);
}

/** The rig stands still and it is known where: what was waiting for that happens now. */
export function settled(turn: Turn): void {
  turn.set({ settle: null });
  answerWorkHold(turn);
  const { run, rigId } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended') return;
  turn.setRun({ unknown: false, stillSinceMs: turn.nowMs });
  if (run.doubt !== null) return enterHold(turn, 'doubt');
  if (run.stop) return finishRun(turn, 'stopped');
  const { after } = run;
  turn.setRun({ after: null });
  switch (after?.to) {
    case 'complete':
      return finishRun(turn, 'complete');
    case 'ended':
      return finishRun(turn, 'stopped');
    case 'held':
      return enterHold(turn, after.reason, after.note);
    case 'paused':
      turn.setRun({ mode: 'paused', pause: null });
      turn.event({ kind: 'run-paused', rigId, runId: run.order.runId, personId: after.personId });
      return undefined;
    case undefined:
      return undefined;
  }
}

/** Answers those who began a work hold: the rig is known to stand still. */
export function answerWorkHold(turn: Turn): void {
  const { workHold } = turn.state;
  if (!workHold || workHold.answerTo.length === 0) return;
  for (const commandId of workHold.answerTo) turn.done(commandId);
  turn.set({ workHold: { ...workHold, answerTo: [] } });
}

/** From the beginning: settings, home, trim, register with what is cut so far, then the next piece. */
export function beginHoming(turn: Turn, measureAgain: boolean): void {
  const { run, rigId } = turn.state;
  if (!run) return;
  const { runId, firstPieces } = run.order;
  turn.note({ note: 'homing', rigId, runId, measureAgain });
  turn.setRun({
    mode: 'moving',
    cursor: PROGRAM_BEGIN,
    registered: false,
    standbyCount: null,
    mustHome: false,
    measureAgain: false,
    measureAt: measureAgain ? (firstPieces > 0 ? run.cut + firstPieces : null) : run.measureAt,
    refusal: null,
    saidAgain: 0,
    hold: null,
    stillSinceMs: null,
  });
}
