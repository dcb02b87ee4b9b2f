import type { Reply } from '@/agent/dialect/reply';
import type { Answered } from './counting';
import { displayText } from './display';
import { beginSettle, doubtOrHold, enterHold, requireHome } from './holding';
import { onSettle } from './settle-answers';
import { faultOf, needsFaultStop, readHeaters, readSwitches, type RunningFault } from './signals';
import type { Purpose } from './state';
import { onStep } from './step-answers';
import type { Turn } from './turn';

/** A run does not go on for longer than this without a temperature where a heater is fitted. */
const HEATER_UNTOLD_MS = 10_000;

/** What the answer to the line in flight means. */
export function onAnswered(turn: Turn, purpose: Purpose, answered: Answered): void {
  switch (purpose.for) {
    case 'step':
      return onStep(turn, purpose.cursor, purpose.step, answered);
    case 'settle':
      return onSettle(turn, purpose.stage, answered);
    case 'display':
      return onDisplay(turn, purpose.text);
    case 'switches':
      return onSwitches(turn, answered.replies);
    case 'heaters':
      return onHeaters(turn, answered.replies);
    case 'let-go':
      return onLetGo(turn);
  }
}

function onLetGo(turn: Turn): void {
  requireHome(turn, false);
  turn.setRun({ stillSinceMs: null });
  if (turn.state.run?.mode === 'paused') {
    enterHold(turn, 'steppers-released');
    turn.setRun({ stillSinceMs: null });
  }
}

function onDisplay(turn: Turn, text: string): void {
  const { showing } = turn.state;
  turn.set({ displayShown: text });
  if (displayText(turn.state) !== text) return;
  for (const commandId of showing) turn.done(commandId);
  turn.set({ showing: [] });
}

function onSwitches(turn: Turn, replies: readonly Reply[]): void {
  const { signals, profile, polledMs, rigId } = turn.state;
  const next = readSwitches(signals, profile, replies, turn.at);
  turn.set({ signals: next, polledMs: { ...polledMs, switches: turn.nowMs } });
  const { reading } = next.guard;
  if (reading === 'open' && signals.guard.reading !== 'open') turn.event({ kind: 'guard-opened', rigId });
  if (reading === 'closed' && signals.guard.reading === 'open') turn.event({ kind: 'guard-closed', rigId });
  watchFaults(turn);
}

function onHeaters(turn: Turn, replies: readonly Reply[]): void {
  const { signals, profile, polledMs, run, coldC, heaterToldMs } = turn.state;
  const active = run && run.mode !== 'holding' && run.mode !== 'ended';
  const next = readHeaters(signals, profile, replies, turn.at, active ? coldC : null);
  const told = next.heater.reading !== 'unknown';
  turn.set({ signals: next, polledMs: { ...polledMs, heaters: turn.nowMs } });
  if (told) turn.set({ heaterToldMs: turn.nowMs });
  else if (run?.mode === 'moving' && turn.nowMs - heaterToldMs >= HEATER_UNTOLD_MS) {
    return beginSettle(turn, {
      to: 'held',
      reason: 'heater-warm',
      note: 'The rig does not tell its heaters.',
    });
  }
  watchFaults(turn);
}

function watchFaults(turn: Turn): void {
  const { run, signals, profile } = turn.state;
  const fault = faultOf(signals);
  // A heater that warms where nothing moves is as urgent; a guard is open there by right.
  const stands = run?.mode === 'paused' || run?.mode === 'held';
  if (fault === 'heater-warm' && stands) return enterHold(turn, fault);
  if (!fault || run?.mode !== 'moving') return;
  if (needsFaultStop(fault, signals, profile)) return stopAtOnce(turn, fault);
  beginSettle(turn, { to: 'held', reason: fault, note: '' });
}

/** `M112`: the board is dead until a reset, and so is its register. */
function stopAtOnce(turn: Turn, fault: RunningFault): void {
  turn.effects.push({ do: 'interrupt', command: 'M112' });
  turn.set({ halted: true });
  doubtOrHold(turn, fault, 'The motors were switched off; reset the rig.');
}
