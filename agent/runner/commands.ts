import type { Command, MovingCommand, QuietCommand } from '@/lib/protocol/commands';
import { beginHoming, beginSettle, enterHold, finishRun, requireHome, voidOpenCut } from './holding';
import { refuseMoving } from './refuse-moving';
import type { Turn } from './turn';

/** Commands remembered as carried out; older ones are refused by their age alone. */
const TAKEN_MAX = 200;
/** After so many wrong codes a new one is shown. */
const WRONG_CODES_MAX = 3;

/** A command as it reached the rig, with fresh randomness for what it may renew. */
export interface CommandEvent {
  command: Command;
  /** Server time minus the agent's, ms. */
  skewMs: number;
  challenge: string;
  code: string;
}

export function onCommand(turn: Turn, event: CommandEvent): void {
  const { command } = event;
  if (command.kind === 'start-run' || command.kind === 'go-on') return onMoving(turn, event, command);
  if (!STOPS.includes(command.kind) && command.fence < turn.state.fence) {
    return turn.refuse(command.id, 'fence-old');
  }
  adoptFence(turn, command.fence);
  onQuiet(turn, event, command);
}

const STOPS: readonly Command['kind'][] = ['pause', 'stop', 'hold', 'begin-work-hold'];

export function adoptFence(turn: Turn, fence: number): void {
  if (fence <= turn.state.fence) return;
  turn.set({ fence });
  turn.note({ note: 'fence', rigId: turn.state.rigId, fence });
}

function onMoving(turn: Turn, event: CommandEvent, command: MovingCommand): void {
  const code = refuseMoving(turn.state, command, turn.nowMs + event.skewMs, turn.nowMs);
  if (code) {
    if (code === 'presence-wrong') countWrongCode(turn, event.code);
    return turn.refuse(command.id, code);
  }
  const { rigId, taken } = turn.state;
  adoptFence(turn, command.fence);
  turn.note({ note: 'command-taken', rigId, commandId: command.id });
  turn.set({ taken: [...taken, command.id].slice(-TAKEN_MAX), challenge: event.challenge, presence: null });
  if (command.kind === 'start-run') startRun(turn, command);
  else goOn(turn, command);
  turn.done(command.id);
}

function countWrongCode(turn: Turn, freshCode: string): void {
  const { presence } = turn.state;
  if (!presence) return;
  const wrong = presence.wrong + 1;
  if (wrong >= WRONG_CODES_MAX) showCode(turn, freshCode);
  else turn.set({ presence: { ...presence, wrong } });
}

function showCode(turn: Turn, code: string): void {
  turn.set({
    presence: { code, madeMs: turn.nowMs, wrong: 0 },
  });
}

function startRun(turn: Turn, { personId, id }: MovingCommand): void {
  const { run, rigId } = turn.state;
  if (!run) return;
  noteCold(turn, null);
  turn.event({ kind: 'run-started', rigId, runId: run.order.runId, personId, commandId: id });
  beginHoming(turn, true);
}

/** From here on a heater that rises is one that warms. */
function noteCold(turn: Turn, since: number | null): void {
  const { heater } = turn.state.signals;
  if (!('actualC' in heater)) return;
  turn.set({ coldC: Math.min(since ?? heater.actualC, heater.actualC), heaterToldMs: turn.nowMs });
}

function goOn(
  turn: Turn,
  { personId, id, firstPiecesAgain }: Extract<MovingCommand, { kind: 'go-on' }>,
): void {
  const { run, rigId } = turn.state;
  if (!run) return;
  const { runId, firstPieces, pieces } = run.order;
  noteCold(turn, turn.state.coldC);
  turn.setRun({ hold: null, refusal: null, stillSinceMs: null });
  if (run.hold === 'first-pieces') turn.setRun({ measureAt: null });
  turn.event({ kind: 'run-went-on', rigId, runId, personId, commandId: id });
  if (firstPiecesAgain && firstPieces > 0) {
    turn.setRun({ measureAt: run.cut + firstPieces });
    turn.note({ note: 'measure-again', rigId, runId });
  }
  if (run.mustHome && run.cut >= pieces) return finishRun(turn, 'complete');
  if (run.mustHome) return beginHoming(turn, run.measureAgain);
  turn.setRun({ mode: 'moving' });
  const { measureAt } = turn.state.run ?? run;
  // Restarted right at the end of the last first piece: they are due now.
  const due = measureAt !== null && run.cut >= measureAt && run.cut < pieces;
  if (due && run.cursor.part === 'piece' && run.cursor.index === 0) {
    beginSettle(turn, { to: 'held', reason: 'first-pieces', note: '' });
  }
}

function onQuiet(turn: Turn, event: CommandEvent, command: QuietCommand): void {
  switch (command.kind) {
    case 'take-program':
      return takeProgram(turn, command.id, command.runId);
    case 'drop-program':
      return dropProgram(turn, command.id, command.runId);
    case 'show-code':
      return onShowCode(turn, event);
    case 'pause':
      return onPause(turn, command.id, command.runId, command.personId);
    case 'stop':
      if (turn.state.run?.order.runId === command.runId) stopRun(turn, command.personId);
      return turn.done(command.id);
    case 'hold':
      return onHold(turn, command);
    case 'settle-piece':
      return settlePiece(turn, command);
    case 'begin-work-hold':
      return beginWorkHold(turn, command.id, command.personId);
    case 'end-work-hold':
      return endWorkHold(turn, command.id, command.personId);
    case 'clear-tray':
      return clearTray(turn, command.id, command.runId);
    case 'reload-rigs':
      return turn.done(command.id);
  }
}

function takeProgram(turn: Turn, commandId: string, runId: string): void {
  const { run, fetching } = turn.state;
  if (run?.order.runId === runId) return turn.done(commandId);
  if (run) return turn.refuse(commandId, run.mode === 'ended' ? 'tray-not-cleared' : 'rig-busy');
  turn.set({ fetching: [...fetching, commandId] });
  turn.effects.push({ do: 'fetch', commandId, runId });
}

function dropProgram(turn: Turn, commandId: string, runId: string): void {
  const { run, rigId } = turn.state;
  if (run?.order.runId !== runId) return turn.done(commandId);
  if (run.mode !== 'holding') return turn.refuse(commandId, 'illegal-step');
  turn.set({ run: null });
  turn.event({ kind: 'program-dropped', rigId, runId });
  turn.effects.push({ do: 'drop', runId });
  turn.done(commandId);
}

function onShowCode(turn: Turn, { command, code, challenge }: CommandEvent): void {
  const { profile, port, halted, run, showing } = turn.state;
  if (!profile.fitted.display) return turn.refuse(command.id, 'illegal-step');
  if (port !== 'open' || halted) return turn.refuse(command.id, 'rig-not-connected');
  if (run?.mode === 'moving') return turn.refuse(command.id, 'illegal-step');
  showCode(turn, code);
  turn.set({ challenge, showing: [...showing, command.id] });
}

function onPause(turn: Turn, commandId: string, runId: string, personId: string): void {
  const { run } = turn.state;
  if (run?.order.runId !== runId) return turn.refuse(commandId, 'program-not-held');
  if (run.mode === 'moving') turn.setRun({ pause: { personId } });
  turn.done(commandId);
}

/** Nothing more is sent; no axis moves but to end what is queued. `personId` null: at the rig, without server. */
export function stopRun(turn: Turn, personId: string | null): void {
  const { run, rigId, port } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended' || run.stop) return;
  turn.setRun({ stop: { personId } });
  turn.note({ note: 'run-stopping', rigId, runId: run.order.runId, personId });
  if (run.doubt !== null) return;
  if (run.mode === 'moving' || run.mode === 'settling') {
    return beginSettle(turn, { to: 'ended', personId });
  }
  // It stands still and nothing is open: it ends here. An open piece waits for the rig's word.
  if (!run.unknown || (port !== 'open' && run.openCut === null)) finishRun(turn, 'stopped');
}

function onHold(turn: Turn, command: Extract<QuietCommand, { kind: 'hold' }>): void {
  const { run, rigId } = turn.state;
  if (run?.order.runId !== command.runId) return turn.refuse(command.id, 'program-not-held');
  if (run.mode === 'holding' || run.mode === 'ended') return turn.refuse(command.id, 'illegal-step');
  const { personId, cause } = command;
  const piece = run.openCut ?? (run.cursor.part === 'piece' ? run.cursor.piece : Math.max(1, run.cut));
  turn.event({ kind: 'misfeed', rigId, runId: command.runId, piece, cause, foundBy: 'person', personId });
  requireHome(turn, false);
  if (run.mode === 'moving' || run.mode === 'settling') {
    beginSettle(turn, { to: 'held', reason: 'misfeed', note: cause });
  } else {
    enterHold(turn, 'misfeed', cause);
  }
  turn.done(command.id);
}

function settlePiece(turn: Turn, command: Extract<QuietCommand, { kind: 'settle-piece' }>): void {
  const { run, rigId } = turn.state;
  if (run?.order.runId !== command.runId || run.doubt === null)
    return turn.refuse(command.id, 'illegal-step');
  const { answer, personId, runId } = command;
  const piece = run.doubt;
  turn.event({ kind: 'piece-settled', rigId, runId, piece, answer, personId });
  if (answer === 'discard') voidOpenCut(turn);
  turn.setRun({ doubt: null, openCut: null, cut: answer === 'count' ? piece : run.cut });
  turn.done(command.id);
  if (run.stop) finishRun(turn, 'stopped');
  else if (answer === 'count' && piece >= run.order.pieces) finishRun(turn, 'complete');
}

function beginWorkHold(turn: Turn, commandId: string, personId: string): void {
  const { workHold, rigId, port } = turn.state;
  if (workHold && workHold.personId !== personId) return turn.refuse(commandId, 'work-hold');
  if (!workHold) turn.event({ kind: 'work-hold-began', rigId, personId });
  turn.set({ workHold: { personId, answerTo: [...(workHold?.answerTo ?? []), commandId] } });
  const { run } = turn.state;
  requireHome(turn, true);
  if (run?.mode === 'moving' || run?.mode === 'settling') {
    return beginSettle(turn, run.after ?? { to: 'held', reason: 'work-hold', note: '' });
  }
  if (run?.mode === 'paused') enterHold(turn, 'work-hold');
  if (port === 'open') turn.set({ settle: turn.state.settle ?? 'await' });
}

/** "Until that same person ends it at the rig." */
function endWorkHold(turn: Turn, commandId: string, personId: string): void {
  const { workHold, rigId } = turn.state;
  if (workHold && workHold.personId !== personId) return turn.refuse(commandId, 'work-hold');
  if (workHold) {
    for (const waiting of workHold.answerTo) turn.done(waiting);
    turn.set({ workHold: null });
    turn.event({ kind: 'work-hold-ended', rigId, personId });
  }
  turn.done(commandId);
}

function clearTray(turn: Turn, commandId: string, runId: string): void {
  const { run, rigId } = turn.state;
  if (run?.order.runId !== runId) return turn.done(commandId);
  if (run.mode !== 'ended') return turn.refuse(commandId, 'illegal-step');
  turn.set({ run: null });
  turn.note({ note: 'tray-cleared', rigId, runId });
  turn.effects.push({ do: 'drop', runId });
  turn.done(commandId);
}
