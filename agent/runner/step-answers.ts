import type { PositionReport } from '@/agent/dialect/position';
import type { HoldReason, MisfeedCause } from '@/lib/fleet/run';
import type { ProgramStep } from '@/lib/program/steps';
import { countPiece, isTrimCut, noteTrim, positionIn, shows, type Answered } from './counting';
import { beginSettle, requireHome, voidOpenCut } from './holding';
import { atCut, atStandby, fedWhole, near } from './standing';
import { stepsOf, type Cursor } from './state';
import type { Turn } from './turn';

/** The rig itself reports a misfeed of a piece; it is cut anew after home and trim. */
function misfeedByRig(turn: Turn, reason: HoldReason, cause: MisfeedCause, note: string): void {
  const { run, rigId } = turn.state;
  if (!run) return;
  if (run.cursor.part === 'piece') {
    const piece = run.cursor.piece;
    turn.event({
      kind: 'misfeed',
      rigId,
      runId: run.order.runId,
      piece,
      cause,
      foundBy: 'rig',
      personId: null,
    });
  }
  voidOpenCut(turn);
  requireHome(turn, false);
  beginSettle(turn, { to: 'held', reason, note });
}

/** A line whose answer is lost or wrong again and again is not answered by noise. */
const SAID_AGAIN_MAX = 10;

/** The line is said once more, unless that has been tried too often; what is open stays so until the rig is asked. */
function sayAgain(turn: Turn): void {
  const { run } = turn.state;
  if (run?.mode !== 'moving') return;
  const saidAgain = run.saidAgain + 1;
  turn.setRun({ saidAgain });
  if (saidAgain <= SAID_AGAIN_MAX) return;
  requireHome(turn, false);
  const note = 'The rig does not show that it did what it was told.';
  beginSettle(turn, { to: 'held', reason: 'position-wrong', note });
}

/** What the answer to a line of the program means. */
export function onStep(turn: Turn, cursor: Cursor, step: ProgramStep, answered: Answered): void {
  const { run } = turn.state;
  if (!run) return;
  const registered = step.kind === 'register' && shows(turn, step.register, answered);
  if (run.refusal !== null && run.mode === 'moving' && !registered) {
    return misfeedByRig(turn, 'firmware-refused', 'other', run.refusal);
  }
  if (step.kind === 'await') {
    // Taken is not done: only the ok of M400 says that motion has ended.
    if (!answered.sure) return sayAgain(turn);
    turn.setRun({ jawsClosedMs: turn.nowMs });
    if (isTrimCut(run, cursor)) noteTrim(turn);
  }
  // A place is named before anything moves by it: said again until the rig shows the right one.
  if (step.kind === 'declare' && !isDeclared(turn, step.cutAxisMm, answered)) return sayAgain(turn);
  if (step.kind === 'ask' && !onAsk(turn, cursor, answered)) return sayAgain(turn);
  if (step.kind === 'register') {
    // A line whose answer was lost is said again: it sets the same numbers.
    if (!registered) return sayAgain(turn);
    onRegister(turn, cursor, step.piece);
  }
  if (turn.state.run?.mode === 'moving') advance(turn, cursor);
  // A trim that is broken off is not gone on with, but whether its cut was made is charged.
  else if (cursor.part === 'trim') turn.setRun({ cursor: { ...cursor, index: cursor.index + 1 } });
}

function isDeclared(turn: Turn, cutAxisMm: number, { replies }: Answered): boolean {
  const position = positionIn(replies);
  return position !== null && near(position[turn.state.profile.cutAxis.axis], cutAxisMm);
}

/** Whether the rig is where it must be; if not, the run is held. False also when it is to be asked again. */
function onAsk(turn: Turn, cursor: Cursor, { replies }: Answered): boolean {
  const { run, profile } = turn.state;
  const position = positionIn(replies);
  if (!run || !position) return false;
  // This firmware tells its steps: a report without them was cut short, and so may be its last number.
  if (run.standbyCount !== null && !position.count) return false;
  if (cursor.part === 'home') {
    if (!atStandby(position, profile)) return wrong(turn, position);
    turn.setRun({ standbyCount: position.count?.[profile.cutAxis.axis] ?? null });
  }
  if (cursor.part === 'piece') {
    const right = fedWhole(position, run, cursor.piece) && atCut(position, profile, run.standbyCount);
    if (!right) return wrong(turn, position);
  }
  if (cursor.part === 'trim' && !atCut(position, profile, run.standbyCount)) return wrong(turn, position);
  return true;
}

function wrong(turn: Turn, position: PositionReport): false {
  if (turn.state.run?.mode === 'moving') {
    const { X, Y, Z, E, count } = position;
    const steps = count ? ` Count X:${count.X} Y:${count.Y} Z:${count.Z}` : '';
    misfeedByRig(turn, 'position-wrong', 'other', `X:${X} Y:${Y} Z:${Z} E:${E}${steps}`);
  }
  return false;
}

function onRegister(turn: Turn, cursor: Cursor, piece: number): void {
  const { run, rigId } = turn.state;
  if (!run) return;
  if (cursor.part === 'piece') return countPiece(turn, piece);
  turn.setRun({ registered: true });
  const { runId } = run.order;
  turn.note({ note: 'registered', rigId, runId, standbyCount: run.standbyCount });
}

/** To the next line; at the end of a piece what was asked for meanwhile comes first. */
function advance(turn: Turn, cursor: Cursor): void {
  const { run } = turn.state;
  if (!run) return;
  const next = { ...cursor, index: cursor.index + 1 };
  turn.setRun({ saidAgain: 0 });
  if (next.index < stepsOf(run.program, cursor).length) {
    turn.setRun({ cursor: next });
    return;
  }
  switch (cursor.part) {
    case 'preamble':
      return turn.setRun({ cursor: { part: 'home', piece: 0, index: 0 } });
    case 'home':
      return turn.setRun({ cursor: { part: 'trim', piece: 0, index: 0 } });
    case 'trim':
      return turn.setRun({ cursor: { part: 'register', piece: 0, index: 0 } });
    case 'register':
    case 'piece':
      return betweenPieces(turn);
    case 'end':
      return beginSettle(turn, { to: 'complete' });
  }
}

function betweenPieces(turn: Turn): void {
  const { run, signals } = turn.state;
  if (!run) return;
  const complete = run.cut >= run.order.pieces;
  turn.setRun({
    cursor: complete ? { part: 'end', piece: 0, index: 0 } : { part: 'piece', piece: run.cut + 1, index: 0 },
  });
  if (run.pause) return beginSettle(turn, { to: 'paused', personId: run.pause.personId });
  if (complete) return;
  if (run.measureAt !== null && run.cut >= run.measureAt) {
    return beginSettle(turn, { to: 'held', reason: 'first-pieces', note: '' });
  }
  if (signals.wire.reading === 'missing') {
    requireHome(turn, false);
    beginSettle(turn, { to: 'held', reason: 'wire-missing', note: '' });
  }
}
