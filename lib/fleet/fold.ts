import type { EventBody } from '@/lib/protocol/events';
import { alarmOfHold, type AlarmKind } from './alarms';
import type { LotState } from './lot';
import { RUN_TRANSITIONS, type HoldReason, type RunState } from './run';
import { mayStep } from './transitions';

/** What events change of a run. Moments as ISO texts, by the agent's clock. Counts are not here: see `counts.ts`. */
export interface FoldedRun {
  state: RunState;
  stateSince: string;
  holdReason: HoldReason | null;
  holdNote: string;
  doubtPiece: number | null;
  programHeldAt: string | null;
  startedAt: string | null;
  startedBy: string | null;
  endedAt: string | null;
  outcome: 'complete' | 'stopped' | null;
}

export interface RaisedAlarm {
  kind: AlarmKind;
  details: Record<string, string | number>;
}

/** The run after one event and what follows from it. `lot`: the state its lot must reach; null: as it is. */
export interface Folded {
  run: FoldedRun;
  lot: Extract<LotState, 'running' | 'cut' | 'waiting'> | null;
  raise: RaisedAlarm[];
  end: AlarmKind[];
}

/** Alarms that stand only while a run is held; whatever moves it on or ends it answers them. */
export const HOLD_ALARMS: readonly AlarmKind[] = [
  'run held',
  'piece in doubt',
  'first pieces to measure',
  'guard opened in a run',
  'heater warm in a run',
];

type RunEvent = Extract<EventBody, { runId: string }>;

function nothing(run: FoldedRun): Folded {
  return { run, lot: null, raise: [], end: [] };
}

/** A step to `state`, or nothing when the run may not take it: what comes too late stays in the log alone. */
function step(
  run: FoldedRun,
  state: RunState,
  at: string,
  more: Partial<Folded>,
  own: Partial<FoldedRun> = {},
): Folded {
  if (!mayStep(RUN_TRANSITIONS, run.state, state)) return nothing(run);
  const moved = { ...run, holdReason: null, holdNote: '', ...own, state, stateSince: at };
  return { ...nothing(moved), ...more };
}

function held(run: FoldedRun, event: Extract<RunEvent, { kind: 'run-held' }>, at: string): Folded {
  if (run.state !== 'held' && !mayStep(RUN_TRANSITIONS, run.state, 'held')) return nothing(run);
  const kind = alarmOfHold(event.reason);
  const stands = (other: AlarmKind) =>
    other === kind || (other === 'piece in doubt' && run.doubtPiece !== null);
  const details = {
    reason: event.reason,
    ...(event.note === '' ? {} : { note: event.note }),
    ...(kind === 'piece in doubt' && run.doubtPiece !== null ? { piece: run.doubtPiece } : {}),
  };
  return {
    run: {
      ...run,
      state: 'held',
      stateSince: run.state === 'held' ? run.stateSince : at,
      holdReason: event.reason,
      holdNote: event.note,
    },
    lot: null,
    raise: [{ kind, details }],
    end: HOLD_ALARMS.filter((other) => !stands(other)),
  };
}

function wentOn(run: FoldedRun, at: string): Folded {
  return step(run, 'cutting', at, { lot: 'running', end: [...HOLD_ALARMS] });
}

function ended(run: FoldedRun, event: Extract<RunEvent, { kind: 'run-ended' }>, at: string): Folded {
  const over = { endedAt: at, outcome: event.outcome };
  const follows = {
    lot: 'cut' as const,
    raise: [{ kind: 'tray to clear' as const, details: { outcome: event.outcome } }],
    end: [...HOLD_ALARMS],
  };
  return step(run, 'ended', at, follows, over);
}

/**
 * Folds one event of a run into its state. Total: an event that the state machine does not allow now changes nothing
 * (it is stored all the same), so a replay of any history never leaves the table of steps.
 */
export function foldRunEvent(run: FoldedRun, event: RunEvent, at: string): Folded {
  switch (event.kind) {
    case 'program-held':
      return { ...nothing({ ...run, programHeldAt: run.programHeldAt ?? at }), end: ['program refused'] };
    case 'program-refused':
      return {
        ...nothing(run),
        raise: [{ kind: 'program refused', details: { problem: event.problems[0] ?? 'no reason given' } }],
      };
    case 'program-dropped':
      return step(run, 'dropped', at, { lot: 'waiting', end: ['program refused', ...HOLD_ALARMS] });
    case 'run-started':
      return run.state === 'prepared'
        ? step(run, 'cutting', at, { lot: 'running' }, { startedAt: at, startedBy: event.personId })
        : nothing(run);
    case 'run-went-on':
      return run.state === 'paused' || run.state === 'held' ? wentOn(run, at) : nothing(run);
    case 'run-paused':
      return step(run, 'paused', at, { end: [...HOLD_ALARMS] });
    case 'run-held':
      return held(run, event, at);
    case 'run-ended':
      return ended(run, event, at);
    case 'piece-doubted':
      return {
        ...nothing({ ...run, doubtPiece: event.piece }),
        raise: [{ kind: 'piece in doubt', details: { piece: event.piece } }],
      };
    case 'piece-settled':
      return { ...nothing({ ...run, doubtPiece: null }), end: ['piece in doubt'] };
    case 'misfeed':
    case 'trim-cut':
    case 'piece-cut':
      return nothing(run);
  }
}
